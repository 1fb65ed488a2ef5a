import { Migration } from '@mikro-orm/migrations'

/** The room: hearths, the gateways that read probes, the probes with their places, and the two kinds of check. */
export class M0002HearthsGatewaysProbes extends Migration {
  override up(): void {
    this.addSql(`
      create table hearths (
        id uuid primary key default gen_random_uuid(),
        number integer not null unique check (number between 1 and 99),
        name text not null default '' check (char_length(name) <= 60),
        is_active boolean not null default true,
        created_at timestamptz not null
      );

      create table gateways (
        id uuid primary key default gen_random_uuid(),
        name text not null unique check (char_length(name) between 1 and 60),
        may_replay boolean not null default false,
        clock_offset_ms integer,
        last_seen_at timestamptz,
        created_at timestamptz not null
      );

      create table gateway_tokens (
        id uuid primary key default gen_random_uuid(),
        gateway_id uuid not null references gateways (id),
        token_sha256 text not null unique check (token_sha256 ~ '^[0-9a-f]{64}$'),
        created_at timestamptz not null,
        created_by uuid references accounts (id),
        last_used_at timestamptz,
        revoked_at timestamptz
      );
      create index gateway_tokens_gateway_idx on gateway_tokens (gateway_id);

      create table probes (
        id uuid primary key default gen_random_uuid(),
        no integer generated always as identity unique,
        gateway_id uuid not null references gateways (id),
        channel integer not null check (channel between 0 and 255),
        name text not null check (char_length(name) between 1 and 60),
        thermocouple_type text not null check (thermocouple_type in ('K', 'N', 'J', 'T')),
        iec_class integer not null check (iec_class between 1 and 3),
        serial text not null default '' check (char_length(serial) <= 60),
        hearth_id uuid references hearths (id),
        usual_role text not null check (usual_role in ('lead', 'opposite', 'coals', 'spare')),
        height text not null check (height in ('bilge', 'quarter', 'head end', 'head', 'coals')),
        side text not null check (char_length(side) between 1 and 20),
        depth_mm double precision not null check (depth_mm between 0 and 60),
        mounting text not null check (mounting in ('wedge', 'drilled', 'clamped', 'hung')),
        retired_at timestamptz,
        created_at timestamptz not null
      );
      create unique index probes_channel_key on probes (gateway_id, channel) where retired_at is null;

      create table probe_checks (
        id uuid primary key default gen_random_uuid(),
        probe_id uuid not null references probes (id),
        kind text not null check (kind in ('ice', 'boiling', 'block')),
        reference_temp_c double precision not null check (reference_temp_c between -50 and 400),
        measured_temp_c double precision not null check (measured_temp_c between -50 and 400),
        uncertainty_c double precision not null check (uncertainty_c > 0 and uncertainty_c <= 10),
        station_pressure_hpa double precision check (station_pressure_hpa between 500 and 1100),
        checked_at timestamptz not null,
        due_at timestamptz not null,
        account_id uuid not null references accounts (id),
        constraint probe_checks_due_check check (due_at > checked_at),
        constraint probe_checks_pressure_check check ((kind = 'boiling') = (station_pressure_hpa is not null))
      );
      create index probe_checks_probe_idx on probe_checks (probe_id, checked_at desc);
      create trigger probe_checks_append_only before update or delete on probe_checks
        for each row execute function refuse_change();

      create table water_checks (
        id uuid primary key default gen_random_uuid(),
        source text not null check (char_length(source) between 1 and 80),
        tca_ng_per_l double precision not null check (tca_ng_per_l between 0 and 1000),
        free_chlorine_mg_per_l double precision not null check (free_chlorine_mg_per_l between 0 and 20),
        checked_at timestamptz not null,
        due_at timestamptz not null check (due_at > checked_at),
        account_id uuid not null references accounts (id)
      );
      create trigger water_checks_append_only before update or delete on water_checks
        for each row execute function refuse_change();

      grant select, insert, update on hearths, gateways, gateway_tokens, probes to emberstave_app;
      grant select, insert on probe_checks, water_checks to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table water_checks; drop table probe_checks; drop table probes; drop table gateway_tokens;
      drop table gateways; drop table hearths;
    `)
  }
}
