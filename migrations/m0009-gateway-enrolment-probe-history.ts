import { Migration } from '@mikro-orm/migrations'

/**
 * Gateways: one-time codes to enrol by, tokens that follow one another, what each says of itself, retiring. Probes:
 * where each was when, kept by a trigger so that no way of changing a probe can leave it out; swaps during a firing;
 * checks with what they were made of. What the room can judge: repeat placements and the study they belong to.
 */
export class M0009GatewayEnrolmentProbeHistory extends Migration {
  override up(): void {
    this.addSql(gatewaysUp)
    this.addSql(probesUp)
    this.addSql(checksUp)
    this.addSql(studiesUp)
  }

  override down(): void {
    this.addSql(`
      drop table repeatability_placements; drop table repeatability_studies;
      drop function guard_repeatability_placement(); drop function guard_repeatability_study();
      drop index water_checks_source_idx;
      alter table probe_checks drop constraint probe_checks_settled_check, drop column way,
        drop column reference_uncertainty_c, drop column settled_sd_c, drop column settled_slope_c_per_min,
        drop column resolution_c, drop column altitude_m;
      alter table marks drop constraint marks_swap_given, drop column swap_role, drop column from_probe_id,
        drop column to_probe_id;
      drop index firing_probes_probe_idx;
      drop trigger probes_keep_place on probes; drop trigger probes_guard on probes;
      drop function keep_probe_place(); drop function guard_probe();
      drop table probe_places; drop function guard_probe_place();
      alter table probes drop column changed_at, drop column changed_by;
      drop trigger gateways_guard on gateways; drop function guard_gateway();
      drop index refused_readings_newest_idx;
      drop table gateway_enrolments; drop function guard_gateway_enrolment();
      alter table gateway_tokens drop column expires_at, drop column replaced_by;
      alter table gateways drop constraint gateways_status_check, drop column retired_at,
        drop column spooled_readings, drop column spooled_bytes, drop column oldest_unsent_at,
        drop column program_version, drop column uptime_s, drop column status_at;
    `)
  }
}

const gatewaysUp = `
  alter table gateways
    add column retired_at timestamptz,
    add column spooled_readings bigint check (spooled_readings >= 0),
    add column spooled_bytes bigint check (spooled_bytes >= 0),
    add column oldest_unsent_at timestamptz,
    add column program_version text check (char_length(program_version) <= 60),
    add column uptime_s bigint check (uptime_s >= 0),
    add column status_at timestamptz,
    add constraint gateways_status_check
      check ((status_at is null) = (spooled_readings is null and spooled_bytes is null));

  -- A token that is being replaced ends when the new one is first used, or at expires_at.
  alter table gateway_tokens
    add column expires_at timestamptz,
    add column replaced_by uuid references gateway_tokens (id);

  create table gateway_enrolments (
    id uuid primary key default gen_random_uuid(),
    gateway_id uuid not null references gateways (id),
    code_sha256 text not null unique check (code_sha256 ~ '^[0-9a-f]{64}$'),
    created_at timestamptz not null,
    created_by uuid not null references accounts (id),
    expires_at timestamptz not null,
    cancelled_at timestamptz,
    used_at timestamptz,
    used_by text check (char_length(used_by) <= 80),
    token_id uuid references gateway_tokens (id),
    constraint gateway_enrolments_lifetime check (expires_at > created_at and expires_at <= created_at + interval '30 minutes'),
    constraint gateway_enrolments_use check ((used_at is null) = (token_id is null)),
    constraint gateway_enrolments_in_time check (used_at is null or used_at <= expires_at)
  );
  create unique index gateway_enrolments_one_open on gateway_enrolments (gateway_id)
    where used_at is null and cancelled_at is null;

  create function guard_gateway_enrolment() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' or old.used_at is not null or old.cancelled_at is not null then
      raise exception 'a code is used once' using errcode = 'restrict_violation';
    end if;
    if (new.gateway_id, new.code_sha256, new.created_at, new.created_by, new.expires_at)
      is distinct from (old.gateway_id, old.code_sha256, old.created_at, old.created_by, old.expires_at) then
      raise exception 'a code is not changed' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger gateway_enrolments_guard before update or delete on gateway_enrolments
    for each row execute function guard_gateway_enrolment();

  create function guard_gateway() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' then
      raise exception 'a gateway is never deleted' using errcode = 'restrict_violation';
    end if;
    if old.retired_at is not null and new.retired_at is distinct from old.retired_at then
      raise exception 'a retired gateway stays retired' using errcode = 'restrict_violation';
    end if;
    if new.retired_at is not null and old.retired_at is null then
      if exists (select 1 from probes where gateway_id = new.id and retired_at is null) then
        raise exception 'a gateway with probes in use is not retired' using errcode = 'restrict_violation';
      end if;
      if exists (select 1 from gateway_tokens where gateway_id = new.id and revoked_at is null) then
        raise exception 'a gateway with a token is not retired' using errcode = 'restrict_violation';
      end if;
    end if;
    return new;
  end $$;
  create trigger gateways_guard before update or delete on gateways
    for each row execute function guard_gateway();

  create index refused_readings_newest_idx on refused_readings (boot_no, received_at desc, seq desc);
  grant select, insert, update on gateway_enrolments to emberstave_app;
`

const probesUp = `
  alter table probes add column changed_at timestamptz, add column changed_by uuid references accounts (id);

  create table probe_places (
    id uuid primary key default gen_random_uuid(),
    probe_id uuid not null references probes (id),
    gateway_id uuid not null references gateways (id),
    channel integer not null,
    hearth_id uuid references hearths (id),
    usual_role text not null,
    height text not null,
    side text not null,
    depth_mm double precision not null,
    mounting text not null,
    from_at timestamptz not null,
    until_at timestamptz check (until_at >= from_at),
    changed_by uuid references accounts (id),
    constraint one_place_per_probe
      exclude using gist (probe_id with =, tstzrange(from_at, until_at) with &&)
  );
  create index probe_places_probe_idx on probe_places (probe_id, from_at desc);

  create function guard_probe_place() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' or old.until_at is not null or new.until_at is null
      or (to_jsonb(new) - 'until_at') <> (to_jsonb(old) - 'until_at') then
      raise exception 'where a probe was is never changed' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger probe_places_guard before update or delete on probe_places
    for each row execute function guard_probe_place();

  insert into probe_places (probe_id, gateway_id, channel, hearth_id, usual_role, height, side, depth_mm, mounting,
      from_at, until_at)
    select id, gateway_id, channel, hearth_id, usual_role, height, side, depth_mm, mounting, created_at,
           case when retired_at is not null then greatest(retired_at, created_at) end from probes;

  -- Runs with the owner's rights: the application role may read the history and never write it.
  create function keep_probe_place() returns trigger
    language plpgsql security definer set search_path = public, pg_temp as $$
  declare
    open_from timestamptz;
    at timestamptz;
  begin
    if tg_op = 'UPDATE' then
      if (new.gateway_id, new.channel, new.hearth_id, new.usual_role, new.height, new.side, new.depth_mm,
            new.mounting, new.retired_at)
        is not distinct from (old.gateway_id, old.channel, old.hearth_id, old.usual_role, old.height, old.side,
            old.depth_mm, old.mounting, old.retired_at) then
        return new;
      end if;
      select from_at into open_from from probe_places where probe_id = new.id and until_at is null;
      at := case when new.changed_at is distinct from old.changed_at then new.changed_at
                 when new.retired_at is not null then new.retired_at else clock_timestamp() end;
      at := greatest(at, open_from);
      update probe_places set until_at = at where probe_id = new.id and until_at is null;
      if new.retired_at is not null then
        return new;
      end if;
    else
      at := coalesce(new.changed_at, new.created_at);
    end if;
    insert into probe_places (probe_id, gateway_id, channel, hearth_id, usual_role, height, side, depth_mm, mounting,
        from_at, until_at, changed_by)
      values (new.id, new.gateway_id, new.channel, new.hearth_id, new.usual_role, new.height, new.side, new.depth_mm,
        new.mounting, at, case when new.retired_at is not null then greatest(new.retired_at, at) end, new.changed_by);
    return new;
  end $$;
  revoke all on function keep_probe_place() from public;
  create trigger probes_keep_place after insert or update on probes
    for each row execute function keep_probe_place();

  create function guard_probe() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' then
      raise exception 'a probe is never deleted' using errcode = 'restrict_violation';
    end if;
    if tg_op = 'UPDATE' then
      if old.retired_at is not null then
        raise exception 'a retired probe is not changed' using errcode = 'restrict_violation';
      end if;
      if new.retired_at is not null
        and exists (select 1 from firing_probes where probe_id = new.id and until_at is null) then
        raise exception 'a probe that reads a live firing is not retired' using errcode = 'restrict_violation';
      end if;
      if (new.thermocouple_type, new.iec_class) is distinct from (old.thermocouple_type, old.iec_class)
        and exists (select 1 from firing_probes where probe_id = new.id) then
        raise exception 'type and class of a probe that read a firing are not changed'
          using errcode = 'restrict_violation';
      end if;
    end if;
    if (tg_op = 'INSERT' or new.gateway_id <> old.gateway_id)
      and exists (select 1 from gateways where id = new.gateway_id and retired_at is not null) then
      raise exception 'a retired gateway reads no probe' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger probes_guard before insert or update or delete on probes
    for each row execute function guard_probe();

  create index firing_probes_probe_idx on firing_probes (probe_id, from_at desc);
  alter table marks
    add column swap_role text check (swap_role in ('lead', 'opposite', 'coals')),
    add column from_probe_id uuid references probes (id),
    add column to_probe_id uuid references probes (id);
  -- Marks of before had no probes named; they stand.
  alter table marks add constraint marks_swap_given check (
    case when kind = 'swap' then swap_role is not null and from_probe_id is not null and to_probe_id is not null
           and from_probe_id <> to_probe_id
         else swap_role is null and from_probe_id is null and to_probe_id is null end) not valid;

  grant select on probe_places to emberstave_app;
`

const checksUp = `
  alter table probe_checks
    add column way text not null default 'by hand' check (way in ('by hand', 'live')),
    add column reference_uncertainty_c double precision check (reference_uncertainty_c > 0),
    add column settled_sd_c double precision check (settled_sd_c >= 0),
    add column settled_slope_c_per_min double precision,
    add column resolution_c double precision check (resolution_c >= 0),
    add column altitude_m double precision check (altitude_m between -500 and 5000),
    add constraint probe_checks_settled_check
      check (way = 'by hand' or (settled_sd_c is not null and settled_slope_c_per_min is not null));
  create index water_checks_source_idx on water_checks (lower(source), checked_at desc);
`

const studiesUp = `
  create table repeatability_studies (
    id uuid primary key default gen_random_uuid(),
    no integer generated always as identity unique,
    probe_id uuid not null references probes (id),
    reference_probe_id uuid not null references probes (id),
    height text not null,
    side text not null,
    depth_mm double precision not null,
    mounting text not null,
    heat_words text not null default '' check (char_length(heat_words) <= 500),
    state text not null default 'open' check (state in ('open', 'finished', 'abandoned')),
    started_at timestamptz not null,
    started_by uuid not null references accounts (id),
    ended_at timestamptz,
    end_reason text check (char_length(end_reason) <= 1000),
    signature_id uuid references signatures (id),
    result jsonb,
    adopted_at timestamptz,
    adopted_by uuid references accounts (id),
    adopted_version integer references site_settings (version),
    constraint repeatability_two_probes check (probe_id <> reference_probe_id),
    constraint repeatability_end_check check ((state = 'open') = (ended_at is null)),
    constraint repeatability_result_check check ((state = 'finished') = (result is not null and signature_id is not null)),
    constraint repeatability_adopted_check check (
      (adopted_at is null and adopted_by is null and adopted_version is null)
      or (state = 'finished' and adopted_at is not null and adopted_by is not null and adopted_version is not null))
  );
  create unique index repeatability_one_open_per_probe on repeatability_studies (probe_id) where state = 'open';

  create table repeatability_placements (
    id uuid primary key,
    study_id uuid not null references repeatability_studies (id),
    position integer not null check (position between 1 and 100),
    placed_temp_c double precision not null check (placed_temp_c between -50 and 400),
    reference_temp_c double precision not null check (reference_temp_c between -50 and 400),
    way text not null check (way in ('by hand', 'live')),
    placed_at timestamptz not null,
    account_id uuid not null references accounts (id),
    struck_at timestamptz,
    struck_by uuid references accounts (id),
    strike_reason text check (char_length(strike_reason) between 3 and 500),
    unique (study_id, position),
    constraint repeatability_strike_check check (
      (struck_at is null) = (struck_by is null) and (struck_at is null) = (strike_reason is null))
  );

  create function guard_repeatability_study() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' then
      raise exception 'a study is never deleted' using errcode = 'restrict_violation';
    end if;
    if old.state <> 'open' and (to_jsonb(new) - 'adopted_at' - 'adopted_by' - 'adopted_version')
      <> (to_jsonb(old) - 'adopted_at' - 'adopted_by' - 'adopted_version') then
      raise exception 'a study that has ended is not changed' using errcode = 'restrict_violation';
    end if;
    if new.state = 'finished' and old.state = 'open' and (select count(*) from repeatability_placements
        where study_id = new.id and struck_at is null) < 5 then
      raise exception 'a study needs five placements' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger repeatability_studies_guard before update or delete on repeatability_studies
    for each row execute function guard_repeatability_study();

  -- A placement is kept for ever; one that went wrong is struck out, with its reason, while the study is open.
  create function guard_repeatability_placement() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' or (tg_op = 'UPDATE' and (old.struck_at is not null or new.struck_at is null
        or (to_jsonb(new) - 'struck_at' - 'struck_by' - 'strike_reason')
          <> (to_jsonb(old) - 'struck_at' - 'struck_by' - 'strike_reason'))) then
      raise exception 'a placement is never changed' using errcode = 'restrict_violation';
    end if;
    if not exists (select 1 from repeatability_studies where id = new.study_id and state = 'open') then
      raise exception 'a study that has ended takes no placement' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger repeatability_placements_guard before insert or update or delete on repeatability_placements
    for each row execute function guard_repeatability_placement();

  grant select, insert, update on repeatability_studies, repeatability_placements to emberstave_app;
`
