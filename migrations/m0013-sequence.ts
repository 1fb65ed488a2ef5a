import { Migration } from '@mikro-orm/migrations'

/**
 * The sequence at the fireside: why a step was skipped or short, what was done with a piece of advice, a rose that
 * changes its hearth before the toast, and how right the forecast of each scored firing was.
 */
export class M0013Sequence extends Migration {
  override up(): void {
    this.addSql(`
      alter table marks drop constraint marks_kind_check;
      alter table marks add constraint marks_kind_check check (kind in ('phase', 'stage', 'pull', 'stir', 'feed',
        'mist', 'lid on', 'lid off', 'turn', 'turn over', 'call', 'note', 'swap', 'undone', 'reason', 'advice',
        'move'));
      alter table marks
        add column step text check (step in ('preheat', 'bend', 'stage', 'rest')),
        add column answer text check (answer in ('taken', 'not now')),
        add column from_hearth_id uuid references hearths (id),
        add column to_hearth_id uuid references hearths (id),
        add constraint marks_reason_given check (
          (kind = 'reason') = (step is not null) and (kind <> 'reason' or words ~ '[^[:space:]]')),
        add constraint marks_reason_names_its_stage check (
          kind <> 'reason' or (step = 'stage') = (stage_position is not null)),
        add constraint marks_advice_answered check (
          (kind = 'advice') = (answer is not null) and (kind <> 'advice' or words ~ '[^[:space:]]')),
        add constraint marks_move_given check (
          case when kind = 'move' then from_hearth_id is not null and to_hearth_id is not null
                 and from_hearth_id <> to_hearth_id
               else from_hearth_id is null and to_hearth_id is null end);

      -- A firing changes its hearth before its toast, never in it: its dose is of one fire.
      create function guard_placement() returns trigger language plpgsql as $$
      begin
        if exists (select from firing_placements where firing_id = new.firing_id and id <> new.id)
          and exists (select from firings where id = new.firing_id and toast_at < new.from_at) then
          raise exception 'a firing that toasts stays on its hearth'
            using errcode = 'restrict_violation', constraint = 'placements_before_the_toast';
        end if;
        return new;
      end $$;
      create trigger firing_placements_guard before insert on firing_placements
        for each row execute function guard_placement();

      create table forecast_outcomes (
        firing_id uuid not null,
        score_number integer not null,
        at_s double precision not null check (at_s > 0),
        forecast_minutes double precision not null check (forecast_minutes > 0),
        earliest_minutes double precision not null check (earliest_minutes <= forecast_minutes),
        latest_minutes double precision check (latest_minutes >= forecast_minutes),
        -- From the same moment on: until the dose reached its target, null when the rest came first, and until the rest.
        reached_minutes double precision check (reached_minutes >= 0),
        rested_minutes double precision not null check (rested_minutes >= 0),
        within_minutes double precision not null check (within_minutes > 0),
        -- Null: the rest came before anybody could tell.
        is_within boolean,
        primary key (firing_id, score_number),
        foreign key (firing_id, score_number) references scores (firing_id, number)
      );
      create trigger forecast_outcomes_append_only before update or delete on forecast_outcomes
        for each row execute function refuse_change();
      grant select, insert on forecast_outcomes to emberstave_app;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table forecast_outcomes;
      drop trigger firing_placements_guard on firing_placements; drop function guard_placement();
      alter table marks drop constraint marks_move_given, drop constraint marks_advice_answered,
        drop constraint marks_reason_names_its_stage, drop constraint marks_reason_given,
        drop column step, drop column answer, drop column from_hearth_id, drop column to_hearth_id;
      alter table marks drop constraint marks_kind_check;
      alter table marks add constraint marks_kind_check check (kind in ('phase', 'stage', 'pull', 'stir', 'feed',
        'mist', 'lid on', 'lid off', 'turn', 'turn over', 'call', 'note', 'swap', 'undone'));
    `)
  }
}
