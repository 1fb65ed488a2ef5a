import { Migration } from '@mikro-orm/migrations'

/** Who may sign in, the site's versioned settings, and the hash-chained audit trail. */
export class M0001AccountsSiteAudit extends Migration {
  override up(): void {
    this.addSql(`
      create extension if not exists btree_gist;

      create function refuse_change() returns trigger language plpgsql as $$
      begin
        raise exception '% is append-only', tg_table_name using errcode = 'restrict_violation';
      end $$;

      create table customers (
        id uuid primary key default gen_random_uuid(),
        name text not null check (char_length(name) between 1 and 120),
        contact_email text check (contact_email is null or char_length(contact_email) <= 254),
        created_at timestamptz not null
      );
      create unique index customers_name_key on customers (lower(name));

      create table accounts (
        id uuid primary key default gen_random_uuid(),
        email text not null check (char_length(email) between 3 and 254),
        name text not null check (char_length(name) between 1 and 80),
        role text not null check (role in ('administrator', 'master cooper', 'chemist', 'toaster', 'customer')),
        customer_id uuid references customers (id),
        password_hash text,
        temperature_unit text not null default 'C' check (temperature_unit in ('C', 'F')),
        state text not null check (state in ('invited', 'active', 'closed')),
        created_at timestamptz not null,
        updated_at timestamptz not null,
        revision integer not null default 1 check (revision > 0),
        constraint accounts_customer_check check ((role = 'customer') = (customer_id is not null)),
        constraint accounts_password_check check (state <> 'active' or password_hash is not null)
      );
      create unique index accounts_email_key on accounts (lower(email));

      create table sessions (
        id uuid primary key default gen_random_uuid(),
        account_id uuid not null references accounts (id),
        created_at timestamptz not null,
        last_seen_at timestamptz not null,
        expires_at timestamptz not null,
        ended_at timestamptz,
        user_agent text check (char_length(user_agent) <= 400),
        address text check (char_length(address) <= 64)
      );
      create index sessions_account_idx on sessions (account_id) where ended_at is null;

      create table account_links (
        id uuid primary key default gen_random_uuid(),
        account_id uuid references accounts (id),
        purpose text not null check (purpose in ('invitation', 'password reset', 'first administrator')),
        token_sha256 text not null unique,
        created_at timestamptz not null,
        expires_at timestamptz not null,
        used_at timestamptz,
        constraint account_links_account_check check ((purpose = 'first administrator') = (account_id is null))
      );

      create table sign_in_throttles (
        key text primary key,
        failures integer not null check (failures >= 0),
        window_started_at timestamptz not null,
        blocked_until timestamptz
      );

      create table site_settings (
        version integer primary key check (version > 0),
        name text not null check (char_length(name) between 1 and 120),
        serial_prefix text not null check (serial_prefix ~ '^[A-Z]{2,5}$'),
        time_zone text not null,
        rules jsonb not null check (jsonb_typeof(rules) = 'object'),
        is_demo boolean not null default false,
        created_at timestamptz not null,
        created_by uuid references accounts (id)
      );
      create trigger site_settings_append_only before update or delete on site_settings
        for each row execute function refuse_change();

      create table signatures (
        id uuid primary key default gen_random_uuid(),
        account_id uuid not null references accounts (id),
        account_name text not null,
        account_role text not null,
        meaning text not null check (char_length(meaning) between 1 and 200),
        reason text check (char_length(reason) <= 2000),
        subject_type text not null,
        subject_id uuid not null,
        subject_sha256 text not null check (subject_sha256 ~ '^[0-9a-f]{64}$'),
        signed_at timestamptz not null
      );
      create index signatures_subject_idx on signatures (subject_type, subject_id);
      create trigger signatures_append_only before update or delete on signatures
        for each row execute function refuse_change();

      create table audit_entries (
        seq bigint primary key,
        at timestamptz not null,
        actor_id uuid,
        actor_name text not null,
        action text not null check (char_length(action) between 1 and 80),
        subject_type text not null,
        subject_id text not null,
        detail jsonb not null default '{}',
        previous_hash text not null check (previous_hash ~ '^[0-9a-f]{64}$'),
        hash text not null check (hash ~ '^[0-9a-f]{64}$')
      );
      create index audit_entries_subject_idx on audit_entries (subject_type, subject_id, seq);
      create index audit_entries_at_idx on audit_entries (at);

      -- What an entry's hash covers, as one JSON text; the verify command hashes this text again.
      create function audit_payload(e audit_entries) returns text language sql stable as $$
        select jsonb_build_array(e.previous_hash, e.seq,
          to_char(e.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"'),
          e.actor_id, e.actor_name, e.action, e.subject_type, e.subject_id, e.detail)::text
      $$;

      create function chain_audit_entry() returns trigger language plpgsql as $$
      declare last record;
      begin
        perform pg_advisory_xact_lock(hashtext('emberstave.audit'));
        select seq, hash into last from audit_entries order by seq desc limit 1;
        new.seq := coalesce(last.seq, 0) + 1;
        new.previous_hash := coalesce(last.hash, repeat('0', 64));
        new.hash := encode(sha256(convert_to(audit_payload(new), 'UTF8')), 'hex');
        return new;
      end $$;
      create trigger audit_entries_chain before insert on audit_entries
        for each row execute function chain_audit_entry();
      create trigger audit_entries_append_only before update or delete on audit_entries
        for each row execute function refuse_change();
      create trigger audit_entries_no_truncate before truncate on audit_entries
        for each statement execute function refuse_change();

      grant select, insert, update on customers, accounts, sessions, account_links to emberstave_app;
      grant select, insert, update, delete on sign_in_throttles to emberstave_app;
      grant select, insert on site_settings, signatures, audit_entries to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table audit_entries cascade; drop table signatures; drop table site_settings;
      drop table sign_in_throttles; drop table account_links; drop table sessions; drop table accounts;
      drop table customers; drop function chain_audit_entry(); drop function refuse_change();
    `)
  }
}
