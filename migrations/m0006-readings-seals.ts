import { Migration } from '@mikro-orm/migrations'

/**
 * Readings in daily partitions while hot, what each gateway's boot has had acknowledged, what was refused or
 * declared lost, and the seals of finished firings. Partitions are made and dropped by two functions that run
 * with the owner's rights, since the application role owns no table.
 */
export class M0006ReadingsSeals extends Migration {
  override up(): void {
    this.addSql(`
      create table gateway_boots (
        no integer generated always as identity primary key,
        gateway_id uuid not null references gateways (id),
        boot_id uuid not null,
        received int8multirange not null default '{}',
        acked_seq bigint not null default 0 check (acked_seq >= -1),
        clock_offset_ms integer not null default 0,
        first_seen_at timestamptz not null,
        last_seen_at timestamptz not null,
        unique (gateway_id, boot_id)
      );

      create table gateway_losses (
        boot_no integer not null references gateway_boots (no),
        from_seq bigint not null check (from_seq >= 0),
        to_seq bigint not null check (to_seq >= from_seq),
        reason text not null check (char_length(reason) between 1 and 200),
        declared_at timestamptz not null,
        primary key (boot_no, from_seq, to_seq)
      );

      -- Temperatures in 0.01 degC, electromotive force in 0.1 microvolt, instants in milliseconds since 1970 UTC.
      create table readings (
        boot_no integer not null,
        seq bigint not null check (seq >= 0),
        at_ms bigint not null,
        probe_no integer not null,
        emf_tenth_uv integer,
        cold_centi_c integer,
        temp_centi_c integer,
        flag smallint not null default 0 check (flag between 0 and 3),
        primary key (boot_no, seq, at_ms),
        check (flag > 0 or temp_centi_c is not null or (emf_tenth_uv is not null and cold_centi_c is not null))
      ) partition by range (at_ms);
      create index readings_probe_idx on readings (probe_no, at_ms);

      create table refused_readings (
        boot_no integer not null references gateway_boots (no),
        seq bigint not null,
        reason text not null check (char_length(reason) between 1 and 200),
        reading jsonb not null,
        received_at timestamptz not null,
        primary key (boot_no, seq)
      );

      create function ensure_readings_partition(day date) returns void
        language plpgsql security definer set search_path = public, pg_temp as $$
      declare
        part text := 'readings_' || to_char(day, 'YYYYMMDD');
        from_ms bigint := (extract(epoch from day::timestamp) * 1000)::bigint;
      begin
        if to_regclass(part) is null then
          perform pg_advisory_xact_lock(hashtext('emberstave.partitions'));
          if to_regclass(part) is null then
            execute format('create table %I partition of readings for values from (%s) to (%s)',
              part, from_ms, from_ms + 86400000);
          end if;
        end if;
      end $$;

      -- Drops a day's partition if no live or unsealed firing needs its readings; answers whether it did.
      create function drop_readings_partition(day date) returns boolean
        language plpgsql security definer set search_path = public, pg_temp as $$
      declare
        part text := 'readings_' || to_char(day, 'YYYYMMDD');
      begin
        if to_regclass(part) is null then
          return false;
        end if;
        if exists (select 1 from firings f
          where f.preheat_at < (day + 1)::timestamp at time zone 'UTC'
            and coalesce(f.ended_at, 'infinity') >= day::timestamp at time zone 'UTC'
            and f.state <> 'abandoned'
            and not exists (select 1 from seals s where s.firing_id = f.id)) then
          return false;
        end if;
        execute format('drop table %I', part);
        return true;
      end $$;

      create function list_readings_partitions() returns setof date
        language sql stable security definer set search_path = public, pg_temp as $$
        select to_date(substring(c.relname from 10), 'YYYYMMDD')
          from pg_inherits i join pg_class c on c.oid = i.inhrelid
          where i.inhparent = 'readings'::regclass order by 1
      $$;

      create table seals (
        id uuid primary key default gen_random_uuid(),
        firing_id uuid not null references firings (id),
        revision integer not null check (revision > 0),
        probe_id uuid not null references probes (id),
        from_ms bigint not null,
        to_ms bigint not null check (to_ms >= from_ms),
        reading_count integer not null check (reading_count >= 0),
        encoding smallint not null check (encoding > 0),
        data bytea not null,
        sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
        sealed_at timestamptz not null,
        unique (firing_id, revision, probe_id)
      );
      create trigger seals_append_only before update or delete on seals
        for each row execute function refuse_change();

      revoke all on function ensure_readings_partition(date) from public;
      revoke all on function drop_readings_partition(date) from public;
      revoke all on function list_readings_partitions() from public;
      grant execute on function ensure_readings_partition(date), drop_readings_partition(date),
        list_readings_partitions() to emberstave_app;
      grant select, insert, update on gateway_boots to emberstave_app;
      grant select, insert on gateway_losses, readings, refused_readings, seals to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table seals; drop function list_readings_partitions(); drop function drop_readings_partition(date);
      drop function ensure_readings_partition(date); drop table refused_readings; drop table readings;
      drop table gateway_losses; drop table gateway_boots;
    `)
  }
}
