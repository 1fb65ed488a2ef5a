import { Migration } from '@mikro-orm/migrations'

/**
 * Shared tablets and wall screens: devices that an administrator enrols by a one-time code, the short PINs that work
 * at them alone, and sessions that a PIN opened.
 */
export class M0012DevicesPins extends Migration {
  override up(): void {
    this.addSql(devicesUp)
    this.addSql(pinsUp)
    this.addSql(sessionsUp)
  }

  override down(): void {
    this.addSql(`
      drop trigger devices_end_sessions on devices; drop function end_sessions_of_device();
      drop trigger sessions_of_device_guard on sessions; drop function guard_device_session();
      drop index sessions_device_idx;
      alter table sessions drop constraint sessions_device_check, drop constraint sessions_device_lifetime,
        drop column device_id, drop column kind;
      drop table account_pins; drop function guard_account_pin();
      drop table device_enrolments; drop function guard_device_enrolment();
      drop table devices; drop function guard_device();
    `)
  }
}

const devicesUp = `
  create table devices (
    id uuid primary key default gen_random_uuid(),
    name text not null check (char_length(name) between 1 and 60),
    kind text not null check (kind in ('hearth', 'room', 'wall screen')),
    hearth_id uuid references hearths (id),
    temperature_unit text not null default 'C' check (temperature_unit in ('C', 'F')),
    idle_minutes integer not null default 10 check (idle_minutes between 1 and 240),
    token_sha256 text unique check (token_sha256 ~ '^[0-9a-f]{64}$'),
    created_at timestamptz not null,
    created_by uuid not null references accounts (id),
    enrolled_at timestamptz,
    user_agent text check (char_length(user_agent) <= 400),
    last_seen_at timestamptz,
    revoked_at timestamptz,
    revoked_by uuid references accounts (id),
    revision integer not null default 1 check (revision > 0),
    constraint devices_hearth_check check ((kind = 'hearth') = (hearth_id is not null)),
    constraint devices_enrolled_check check ((token_sha256 is null) = (enrolled_at is null)),
    constraint devices_revoked_check check ((revoked_at is null) = (revoked_by is null))
  );
  create unique index devices_name_key on devices (lower(name)) where revoked_at is null;

  create function guard_device() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' or old.revoked_at is not null then
      raise exception 'a device is never deleted, and a revoked one is not changed'
        using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger devices_guard before update or delete on devices
    for each row execute function guard_device();

  create table device_enrolments (
    id uuid primary key default gen_random_uuid(),
    device_id uuid not null references devices (id),
    code_sha256 text not null unique check (code_sha256 ~ '^[0-9a-f]{64}$'),
    created_at timestamptz not null,
    created_by uuid not null references accounts (id),
    expires_at timestamptz not null,
    cancelled_at timestamptz,
    used_at timestamptz,
    used_from text check (char_length(used_from) <= 64),
    constraint device_enrolments_lifetime
      check (expires_at > created_at and expires_at <= created_at + interval '30 minutes'),
    constraint device_enrolments_in_time check (used_at is null or used_at <= expires_at)
  );
  create unique index device_enrolments_one_open on device_enrolments (device_id)
    where used_at is null and cancelled_at is null;

  create function guard_device_enrolment() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' or old.used_at is not null or old.cancelled_at is not null then
      raise exception 'a code is used once' using errcode = 'restrict_violation';
    end if;
    if (new.device_id, new.code_sha256, new.created_at, new.expires_at)
      is distinct from (old.device_id, old.code_sha256, old.created_at, old.expires_at) then
      raise exception 'a code is not changed' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger device_enrolments_guard before update or delete on device_enrolments
    for each row execute function guard_device_enrolment();

  grant select, insert, update on devices, device_enrolments to emberstave_app;
`

const pinsUp = `
  -- The present PIN of an account is the one that has not ended; the former ones are kept so that none comes again.
  create table account_pins (
    id uuid primary key default gen_random_uuid(),
    account_id uuid not null references accounts (id),
    pin_hash text not null check (pin_hash like '$argon2id$%'),
    set_at timestamptz not null,
    ended_at timestamptz check (ended_at >= set_at),
    -- Wrong tries since the last right one; at ten only the password opens it again.
    wrong_in_a_row integer not null default 0 check (wrong_in_a_row between 0 and 10)
  );
  create unique index account_pins_one_present on account_pins (account_id) where ended_at is null;
  create index account_pins_account_idx on account_pins (account_id, set_at desc);

  create function guard_account_pin() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' or old.ended_at is not null then
      raise exception 'a former PIN is kept as it was' using errcode = 'restrict_violation';
    end if;
    if (new.id, new.account_id, new.pin_hash, new.set_at)
      is distinct from (old.id, old.account_id, old.pin_hash, old.set_at) then
      raise exception 'a PIN is not changed, another takes its place' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger account_pins_guard before update or delete on account_pins
    for each row execute function guard_account_pin();

  grant select, insert, update on account_pins to emberstave_app;
`

const sessionsUp = `
  alter table sessions
    add column kind text not null default 'person' check (kind in ('person', 'device')),
    add column device_id uuid references devices (id),
    add constraint sessions_device_check check ((kind = 'device') = (device_id is not null)),
    add constraint sessions_device_lifetime
      check (kind = 'person' or expires_at <= created_at + interval '12 hours');
  create index sessions_device_idx on sessions (device_id) where ended_at is null and device_id is not null;

  create function guard_device_session() returns trigger language plpgsql as $$
  begin
    if tg_op = 'UPDATE' then
      if (new.account_id, new.kind, new.device_id) is distinct from (old.account_id, old.kind, old.device_id) then
        raise exception 'a session stays its person''s and its device''s' using errcode = 'restrict_violation';
      end if;
      return new;
    end if;
    if new.device_id is not null and not exists (select from devices where id = new.device_id
        and token_sha256 is not null and revoked_at is null and kind <> 'wall screen') then
      raise exception 'nobody signs in at this device' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger sessions_of_device_guard before insert or update on sessions
    for each row execute function guard_device_session();

  -- Whatever revokes a device, or gives its place to another tablet, ends what was opened at it.
  create function end_sessions_of_device() returns trigger language plpgsql as $$
  begin
    update sessions set ended_at = coalesce(new.revoked_at, new.enrolled_at, clock_timestamp())
      where device_id = new.id and ended_at is null;
    return null;
  end $$;
  create trigger devices_end_sessions after update on devices for each row
    when (new.revoked_at is distinct from old.revoked_at or new.token_sha256 is distinct from old.token_sha256
      or new.kind = 'wall screen')
    execute function end_sessions_of_device();
`
