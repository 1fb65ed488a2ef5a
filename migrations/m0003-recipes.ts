import { Migration } from '@mikro-orm/migrations'

/** Recipes, their versions, stages and cues. Approved is frozen for ever: the triggers here hold that. */
export class M0003Recipes extends Migration {
  override up(): void {
    this.addSql(`
      create table recipes (
        id uuid primary key default gen_random_uuid(),
        name text not null check (char_length(name) between 1 and 80),
        customer_id uuid references customers (id),
        created_at timestamptz not null,
        created_by uuid not null references accounts (id)
      );
      create unique index recipes_name_key on recipes (lower(name));

      create table recipe_versions (
        id uuid primary key default gen_random_uuid(),
        recipe_id uuid not null references recipes (id),
        number integer not null check (number > 0),
        state text not null default 'draft'
          check (state in ('draft', 'in review', 'approved', 'superseded', 'withdrawn')),
        revision integer not null default 1 check (revision > 0),
        author_id uuid not null references accounts (id),
        based_on_version_id uuid references recipe_versions (id),
        piece_kind text not null check (piece_kind in ('barrel', 'head')),
        size_and_shape text not null check (char_length(size_and_shape) between 1 and 40),
        thickness_mm double precision not null check (thickness_mm between 10 and 60),
        lead_height text not null check (lead_height in ('bilge', 'quarter', 'head end', 'head')),
        lead_side text not null check (char_length(lead_side) between 1 and 20),
        lead_depth_mm double precision not null check (lead_depth_mm >= 0 and lead_depth_mm < thickness_mm),
        lead_mounting text not null check (lead_mounting in ('wedge', 'drilled', 'clamped')),
        moisture_min_percent double precision not null check (moisture_min_percent between 0 and 60),
        moisture_max_percent double precision not null check (moisture_max_percent between 0 and 60),
        preheat_water_temp_c double precision not null check (preheat_water_temp_c between 0 and 100),
        preheat_method text not null check (preheat_method in ('spray', 'immersion', 'steam', 'none')),
        preheat_minutes double precision not null check (preheat_minutes between 0 and 240),
        bend_minimum_minutes double precision not null check (bend_minimum_minutes between 0 and 120),
        bend_wood_limit_c double precision not null check (bend_wood_limit_c between 40 and 260),
        plan_start_temp_c double precision not null check (plan_start_temp_c between -10 and 260),
        dose_target_minutes double precision check (dose_target_minutes > 0 and dose_target_minutes < 1e6),
        dose_tolerance_log10 double precision not null check (dose_tolerance_log10 between 0.01 and 1),
        wood_maximum_c double precision not null check (wood_maximum_c between 100 and 300),
        climb_maximum_c_per_min double precision not null check (climb_maximum_c_per_min between 0.5 and 60),
        spread_limit_c double precision not null check (spread_limit_c between 0.5 and 60),
        rest_minutes double precision not null check (rest_minutes between 0 and 240),
        flavour_intent text not null default '' check (char_length(flavour_intent) <= 2000),
        notes text not null default '' check (char_length(notes) <= 4000),
        created_at timestamptz not null,
        updated_at timestamptz not null,
        sent_at timestamptz,
        returned_at timestamptz,
        returned_by uuid references accounts (id),
        return_reason text check (char_length(return_reason) <= 2000),
        approved_at timestamptz,
        approved_by uuid references accounts (id),
        superseded_at timestamptz,
        withdrawn_at timestamptz,
        withdrawn_by uuid references accounts (id),
        withdraw_reason text check (char_length(withdraw_reason) <= 2000),
        unique (recipe_id, number),
        constraint recipe_versions_moisture_check check (moisture_min_percent <= moisture_max_percent),
        constraint recipe_versions_four_eyes_check check (approved_by is null or approved_by <> author_id),
        constraint recipe_versions_approved_check
          check (state not in ('approved', 'superseded') or (approved_at is not null and approved_by is not null)),
        constraint recipe_versions_withdrawn_check
          check ((state = 'withdrawn') = (withdrawn_at is not null and withdraw_reason is not null))
      );
      create unique index recipe_versions_one_approved on recipe_versions (recipe_id) where state = 'approved';
      create unique index recipe_versions_one_open on recipe_versions (recipe_id) where state in ('draft', 'in review');

      create table stages (
        id uuid primary key default gen_random_uuid(),
        version_id uuid not null references recipe_versions (id) on delete cascade,
        position integer not null check (position between 1 and 24),
        name text not null check (char_length(name) between 1 and 40),
        kind text not null check (kind in ('ramp', 'hold')),
        target_temp_c double precision not null check (target_temp_c between 0 and 280),
        coals_target_temp_c double precision check (coals_target_temp_c between 0 and 1100),
        minutes double precision not null check (minutes > 0 and minutes <= 240),
        band_c double precision not null check (band_c between 0.5 and 60),
        lid text not null check (lid in ('on', 'off')),
        unique (version_id, position) deferrable initially deferred
      );

      create table cues (
        id uuid primary key default gen_random_uuid(),
        stage_id uuid not null references stages (id) on delete cascade,
        position integer not null check (position between 1 and 12),
        action text not null
          check (action in ('stir', 'feed', 'mist', 'lid on', 'lid off', 'turn', 'turn over', 'look')),
        minute double precision not null check (minute >= 0 and minute <= 240),
        words text not null default '' check (char_length(words) <= 80),
        unique (stage_id, position) deferrable initially deferred
      );

      -- The allowed moves between version states (mirrors lib/recipes/version-states.ts).
      create table recipe_version_moves (from_state text, to_state text, primary key (from_state, to_state));
      insert into recipe_version_moves values
        ('draft', 'in review'), ('in review', 'draft'), ('in review', 'approved'),
        ('approved', 'superseded'), ('approved', 'withdrawn'), ('superseded', 'withdrawn');

      create function guard_recipe_version() returns trigger language plpgsql as $$
      declare
        stamps text[] := array['state', 'updated_at', 'revision', 'sent_at', 'returned_at', 'returned_by',
          'return_reason', 'approved_at', 'approved_by', 'superseded_at', 'withdrawn_at', 'withdrawn_by',
          'withdraw_reason'];
      begin
        if tg_op = 'DELETE' then
          if old.state <> 'draft' then
            raise exception 'a recipe version that left draft is never deleted' using errcode = 'restrict_violation';
          end if;
          return old;
        end if;
        if new.state <> old.state
          and not exists (select 1 from recipe_version_moves where from_state = old.state and to_state = new.state) then
          raise exception 'a recipe version cannot go from % to %', old.state, new.state
            using errcode = 'restrict_violation';
        end if;
        if old.state <> 'draft' and (to_jsonb(new) - stamps) <> (to_jsonb(old) - stamps) then
          raise exception 'a recipe version that is % cannot be edited', old.state
            using errcode = 'restrict_violation';
        end if;
        if old.state in ('approved', 'superseded', 'withdrawn')
          and (new.approved_at, new.approved_by) is distinct from (old.approved_at, old.approved_by) then
          raise exception 'an approval cannot be rewritten' using errcode = 'restrict_violation';
        end if;
        return new;
      end $$;
      create trigger recipe_versions_guard before update or delete on recipe_versions
        for each row execute function guard_recipe_version();

      create function guard_stage() returns trigger language plpgsql as $$
      declare version_state text;
      begin
        select state into version_state from recipe_versions
          where id = (case when tg_op = 'DELETE' then old.version_id else new.version_id end);
        if version_state is not null and version_state <> 'draft' then
          raise exception 'the stages of a version that is % cannot be changed', version_state
            using errcode = 'restrict_violation';
        end if;
        return case when tg_op = 'DELETE' then old else new end;
      end $$;
      create trigger stages_guard before insert or update or delete on stages
        for each row execute function guard_stage();

      create function guard_cue() returns trigger language plpgsql as $$
      declare version_state text;
      begin
        select v.state into version_state from stages s join recipe_versions v on v.id = s.version_id
          where s.id = (case when tg_op = 'DELETE' then old.stage_id else new.stage_id end);
        if version_state is not null and version_state <> 'draft' then
          raise exception 'the cues of a version that is % cannot be changed', version_state
            using errcode = 'restrict_violation';
        end if;
        return case when tg_op = 'DELETE' then old else new end;
      end $$;
      create trigger cues_guard before insert or update or delete on cues
        for each row execute function guard_cue();

      grant select, insert, update, delete on recipes, recipe_versions, stages, cues to emberstave_app;
      grant select on recipe_version_moves to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table cues; drop table stages; drop table recipe_versions; drop table recipe_version_moves; drop table recipes;
      drop function guard_cue(); drop function guard_stage(); drop function guard_recipe_version();
    `)
  }
}
