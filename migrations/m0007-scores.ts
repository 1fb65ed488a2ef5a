import { Migration } from '@mikro-orm/migrations'

/** Scores: each names its ruleset, the site settings and the seal that it was made from; a re-score is a new row. */
export class M0007Scores extends Migration {
  override up(): void {
    this.addSql(`
      create table scores (
        id uuid primary key default gen_random_uuid(),
        firing_id uuid not null references firings (id),
        number integer not null check (number > 0),
        ruleset integer not null check (ruleset > 0),
        site_settings_version integer not null references site_settings (version),
        seal_revision integer not null check (seal_revision > 0),
        verdict text not null check (verdict in
          ('in tolerance', 'cannot tell', 'out of tolerance', 'limit broken', 'incomplete')),
        points double precision check (points between 0 and 100),
        dose_minutes double precision check (dose_minutes >= 0),
        dose_low_minutes double precision,
        dose_high_minutes double precision,
        plan_dose_minutes double precision not null,
        delta_log10_dose double precision,
        toast_depth_mm double precision,
        result jsonb not null check (jsonb_typeof(result) = 'object'),
        sketch jsonb not null default '{}',
        computed_at timestamptz not null,
        unique (firing_id, number),
        constraint scores_points_given check ((verdict = 'incomplete') = (points is null))
      );
      create trigger scores_append_only before update or delete on scores
        for each row execute function refuse_change();
      grant select, insert on scores to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql('drop table scores;')
  }
}
