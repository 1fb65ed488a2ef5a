import { Migration } from '@mikro-orm/migrations'

/** Firings, where they stood, which probes read them, and the append-only marks. */
export class M0005FiringsMarks extends Migration {
  override up(): void {
    this.addSql(`
      create table firings (
        id uuid primary key default gen_random_uuid(),
        piece_id uuid not null references pieces (id),
        recipe_version_id uuid not null references recipe_versions (id),
        recipe_copy jsonb,
        recipe_sha256 text check (recipe_sha256 ~ '^[0-9a-f]{64}$'),
        state text not null
          check (state in ('queued', 'preheating', 'bending', 'toasting', 'resting', 'finished', 'abandoned')),
        is_trial boolean not null default false,
        is_imported boolean not null default false,
        is_first_of_day boolean not null default false,
        toaster_id uuid references accounts (id),
        site_settings_version integer references site_settings (version),
        water_check_id uuid references water_checks (id),
        queued_at timestamptz not null,
        preheat_at timestamptz,
        bend_at timestamptz,
        toast_at timestamptz,
        rest_at timestamptz,
        ended_at timestamptz,
        end_reason text check (char_length(end_reason) <= 1000),
        moisture_percent double precision check (moisture_percent between 0 and 80),
        moisture_method text check (moisture_method in ('oven-dry', 'meter')),
        colour text check (char_length(colour) <= 80),
        smell text check (char_length(smell) <= 80),
        outside_temp_c double precision check (outside_temp_c between -20 and 300),
        remarks text not null default '' check (char_length(remarks) <= 4000),
        revision integer not null default 1 check (revision > 0),
        constraint firings_copy_check check (state = 'queued' or (state = 'abandoned' and preheat_at is null)
          or (recipe_copy is not null and recipe_sha256 is not null and site_settings_version is not null
            and preheat_at is not null and toaster_id is not null)),
        constraint firings_toast_check check (state not in ('toasting', 'resting') or toast_at is not null),
        constraint firings_rest_check check (state <> 'resting' or rest_at is not null),
        constraint firings_end_check check ((state in ('finished', 'abandoned')) = (ended_at is not null)),
        constraint firings_abandon_check check (state <> 'abandoned' or end_reason is not null),
        constraint firings_order_check check (
          (bend_at is null or bend_at >= preheat_at) and (toast_at is null or toast_at >= coalesce(bend_at, preheat_at))
          and (rest_at is null or rest_at >= toast_at) and (ended_at is null or ended_at >= coalesce(preheat_at, queued_at)))
      );
      create unique index firings_one_live_per_piece on firings (piece_id)
        where state in ('preheating', 'bending', 'toasting', 'resting');
      create index firings_started_idx on firings (coalesce(toast_at, preheat_at, queued_at) desc, id desc);
      create index firings_version_idx on firings (recipe_version_id);
      create index firings_state_idx on firings (state) where state not in ('finished', 'abandoned');

      -- The allowed moves between firing states (mirrors lib/firings/firing-states.ts).
      create table firing_moves (from_state text, to_state text, primary key (from_state, to_state));
      insert into firing_moves values
        ('queued', 'preheating'), ('preheating', 'bending'), ('preheating', 'toasting'), ('bending', 'toasting'),
        ('toasting', 'resting'), ('toasting', 'finished'), ('resting', 'finished'), ('queued', 'abandoned'),
        ('preheating', 'abandoned'), ('bending', 'abandoned'), ('toasting', 'abandoned'), ('resting', 'abandoned');

      create function guard_firing() returns trigger language plpgsql as $$
      begin
        if tg_op = 'DELETE' then
          raise exception 'a firing is never deleted' using errcode = 'restrict_violation';
        end if;
        if new.state <> old.state
          and not exists (select 1 from firing_moves where from_state = old.state and to_state = new.state) then
          raise exception 'a firing cannot go from % to %', old.state, new.state using errcode = 'restrict_violation';
        end if;
        if old.recipe_copy is not null
          and (new.recipe_copy, new.recipe_sha256) is distinct from (old.recipe_copy, old.recipe_sha256) then
          raise exception 'the recipe copy of a firing is never changed' using errcode = 'restrict_violation';
        end if;
        return new;
      end $$;
      create trigger firings_guard before update or delete on firings
        for each row execute function guard_firing();

      create table firing_placements (
        id uuid primary key default gen_random_uuid(),
        firing_id uuid not null references firings (id),
        hearth_id uuid not null references hearths (id),
        from_at timestamptz not null,
        until_at timestamptz check (until_at >= from_at),
        constraint one_firing_per_hearth
          exclude using gist (hearth_id with =, tstzrange(from_at, until_at) with &&),
        constraint one_hearth_per_firing
          exclude using gist (firing_id with =, tstzrange(from_at, until_at) with &&)
      );
      create index firing_placements_firing_idx on firing_placements (firing_id);

      create table firing_probes (
        id uuid primary key default gen_random_uuid(),
        firing_id uuid not null references firings (id),
        probe_id uuid not null references probes (id),
        role text not null check (role in ('lead', 'opposite', 'coals')),
        height text not null,
        side text not null,
        depth_mm double precision not null check (depth_mm >= 0),
        mounting text not null,
        from_at timestamptz not null,
        until_at timestamptz check (until_at >= from_at),
        constraint one_firing_per_probe
          exclude using gist (probe_id with =, tstzrange(from_at, until_at) with &&),
        constraint one_probe_per_role
          exclude using gist (firing_id with =, role with =, tstzrange(from_at, until_at) with &&)
      );
      create index firing_probes_firing_idx on firing_probes (firing_id);

      create table marks (
        id uuid primary key,
        firing_id uuid not null references firings (id),
        kind text not null check (kind in ('phase', 'stage', 'pull', 'stir', 'feed', 'mist', 'lid on', 'lid off',
          'turn', 'turn over', 'call', 'note', 'swap', 'undone')),
        at timestamptz not null,
        recorded_at timestamptz not null,
        account_id uuid not null references accounts (id),
        phase text check (phase in ('preheating', 'bending', 'toasting', 'resting')),
        stage_position integer check (stage_position between 1 and 24),
        call text check (call in ('early', 'right', 'late')),
        words text not null default '' check (char_length(words) <= 500),
        replaces_id uuid references marks (id),
        constraint marks_phase_given check ((kind = 'phase') = (phase is not null)),
        constraint marks_stage_given check (kind not in ('stage', 'call') or stage_position is not null),
        constraint marks_call_given check ((kind = 'call') = (call is not null)),
        constraint marks_undone_names_its_mark check (kind <> 'undone' or replaces_id is not null)
      );
      create index marks_firing_idx on marks (firing_id, at);
      create unique index marks_replaced_once on marks (replaces_id) where replaces_id is not null;
      create trigger marks_append_only before update or delete on marks
        for each row execute function refuse_change();

      grant select, insert, update on firings, firing_placements, firing_probes to emberstave_app;
      grant select, insert on marks to emberstave_app;
      grant select on firing_moves to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table marks; drop table firing_probes; drop table firing_placements; drop table firing_moves;
      drop table firings; drop function guard_firing();
    `)
  }
}
