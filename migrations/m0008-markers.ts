import { Migration } from '@mikro-orm/migrations'

/**
 * Markers and their responses. The list is data: nine oak markers to begin with. A response is a formula or a fit; it
 * is never changed, a later one has the next number and is in force.
 */
export class M0008Markers extends Migration {
  override up(): void {
    this.addSql(`
      create table markers (
        id uuid primary key default gen_random_uuid(),
        key text not null unique check (key ~ '^[a-z][a-z0-9_]{1,30}$'),
        name text not null unique check (char_length(name) between 1 and 60),
        unit text not null check (unit in ('µg/g', 'mg/kg', 'mg/g', 'ng/g', 'µg/L', 'mg/L', 'ng/L')),
        position integer not null unique check (position > 0)
      );
      insert into markers (key, name, unit, position) values
        ('cis_lactone', 'cis-Oak lactone', 'µg/g', 1),
        ('trans_lactone', 'trans-Oak lactone', 'µg/g', 2),
        ('eugenol', 'Eugenol', 'µg/g', 3),
        ('isoeugenol', 'Isoeugenol', 'µg/g', 4),
        ('vanillin', 'Vanillin', 'µg/g', 5),
        ('syringaldehyde', 'Syringaldehyde', 'µg/g', 6),
        ('guaiacol', 'Guaiacol', 'µg/g', 7),
        ('methylguaiacol', '4-Methylguaiacol', 'µg/g', 8),
        ('furfural', 'Furfural', 'µg/g', 9);

      create table marker_responses (
        id uuid primary key default gen_random_uuid(),
        marker_id uuid not null references markers (id),
        number integer not null check (number > 0),
        kind text not null check (kind in ('formula', 'fit')),
        unit text not null check (unit in ('µg/g', 'mg/kg', 'mg/g', 'ng/g', 'µg/L', 'mg/L', 'ng/L')),
        formula text check (char_length(formula) between 1 and 400),
        family text check (char_length(family) between 1 and 60),
        fit jsonb check (jsonb_typeof(fit) = 'object'),
        -- What the fit rests on: each result with its barrel or typed dose, as it was when it was fitted.
        results jsonb check (jsonb_typeof(results) = 'array' and jsonb_array_length(results) > 0),
        -- What every assay carries (SCIENCE 8): where in the wood, in what, and how it was taken out.
        matrix text check (char_length(matrix) between 1 and 80),
        extraction text check (char_length(extraction) between 1 and 120),
        sample_position text check (char_length(sample_position) between 1 and 80),
        sample_from_mm double precision check (sample_from_mm between 0 and 60),
        sample_to_mm double precision check (sample_to_mm between 0 and 60),
        -- Doses speak for one place and one set of site rules only.
        lead_height text check (lead_height in ('bilge', 'quarter', 'head end', 'head')),
        lead_side text check (char_length(lead_side) between 1 and 20),
        lead_depth_mm double precision check (lead_depth_mm between 0 and 60),
        lead_mounting text check (lead_mounting in ('wedge', 'drilled', 'clamped')),
        site_settings_version integer not null references site_settings (version),
        note text not null default '' check (char_length(note) <= 1000),
        author_id uuid not null references accounts (id),
        created_at timestamptz not null,
        unique (marker_id, number),
        constraint marker_responses_one_kind check (
          case kind
            when 'formula' then formula is not null
              and num_nonnulls(family, fit, results, matrix, extraction, sample_position, sample_from_mm, sample_to_mm,
                lead_height, lead_side, lead_depth_mm, lead_mounting) = 0
            else formula is null
              and num_nulls(family, fit, results, matrix, extraction, sample_position, sample_from_mm, sample_to_mm,
                lead_height, lead_side, lead_depth_mm, lead_mounting) = 0
          end),
        constraint marker_responses_sample_depth check (sample_from_mm <= sample_to_mm)
      );

      -- Numbers have no holes, so that "response 3" means the third for ever.
      create function guard_marker_response() returns trigger language plpgsql as $$
      declare last integer;
      begin
        perform pg_advisory_xact_lock(hashtext('emberstave.markers'), hashtext(new.marker_id::text));
        select coalesce(max(number), 0) into last from marker_responses where marker_id = new.marker_id;
        if new.number <> last + 1 then
          raise exception 'the next response of this marker is number %', last + 1 using errcode = 'restrict_violation';
        end if;
        return new;
      end $$;
      create trigger marker_responses_in_order before insert on marker_responses
        for each row execute function guard_marker_response();
      create trigger marker_responses_append_only before update or delete on marker_responses
        for each row execute function refuse_change();

      grant select on markers to emberstave_app;
      grant select, insert on marker_responses to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`drop table marker_responses; drop table markers; drop function guard_marker_response();`)
  }
}
