import { Migration } from '@mikro-orm/migrations'

/**
 * Alarms after ISA-18.2: every move of every alarm, append-only, each from where the alarm stood before. A site that
 * is set up already gets the rules of signals and alarms as a new version of its settings, so that what was fired and
 * scored under the older ones stays as it was.
 */
export class M0010Alarms extends Migration {
  override up(): void {
    this.addSql(`
      -- The allowed moves between the states of an alarm (mirrors lib/alarms/alarm-states.ts).
      create table alarm_moves (from_state text, to_state text, primary key (from_state, to_state));
      insert into alarm_moves values
        ('normal', 'unacknowledged'), ('normal', 'suppressed'),
        ('unacknowledged', 'acknowledged'), ('unacknowledged', 'returned unacknowledged'),
        ('unacknowledged', 'shelved'), ('unacknowledged', 'suppressed'), ('unacknowledged', 'normal'),
        ('acknowledged', 'normal'), ('acknowledged', 'shelved'), ('acknowledged', 'suppressed'),
        ('returned unacknowledged', 'normal'), ('returned unacknowledged', 'unacknowledged'),
        ('returned unacknowledged', 'shelved'), ('returned unacknowledged', 'suppressed'),
        ('shelved', 'unacknowledged'), ('shelved', 'normal'), ('shelved', 'suppressed'),
        ('suppressed', 'unacknowledged'), ('suppressed', 'normal');

      create table alarm_events (
        id bigint generated always as identity primary key,
        firing_id uuid not null references firings (id),
        hearth_id uuid references hearths (id),
        kind text not null check (kind in ('wood maximum', 'no reading', 'gateway lost', 'climb maximum', 'spread',
          'below band', 'stage overrun', 'short pull', 'reminder')),
        subject text not null check (char_length(subject) <= 60),
        occurrence_id uuid not null,
        from_state text not null,
        to_state text not null,
        at timestamptz not null,
        account_id uuid references accounts (id),
        words text not null check (char_length(words) between 1 and 300),
        value double precision,
        limit_value double precision,
        reason text check (char_length(reason) between 1 and 200),
        shelved_until timestamptz,
        constraint alarm_events_move_allowed
          foreign key (from_state, to_state) references alarm_moves (from_state, to_state),
        constraint alarm_events_seen_by_somebody check (
          account_id is not null or not (to_state = 'acknowledged' or to_state = 'shelved'
            or (from_state = 'returned unacknowledged' and to_state = 'normal'))),
        constraint alarm_events_shelved_for_a_time check (
          (to_state = 'shelved') = (shelved_until is not null)
          and (to_state <> 'shelved' or (reason is not null and shelved_until > at
            and shelved_until <= at + interval '2 hours'))),
        constraint alarm_events_only_reminders_go_unseen check (
          kind = 'reminder' or not (from_state = 'unacknowledged' and to_state = 'normal'))
      );
      create index alarm_events_alarm_idx on alarm_events (firing_id, kind, subject, id desc);
      create index alarm_events_occurrence_idx on alarm_events (occurrence_id, id);
      create index alarm_events_came_idx on alarm_events (at desc, id desc) where from_state = 'normal';

      -- One move after the other, each from where the alarm stands; time never falls, whatever a clock does.
      create function guard_alarm_event() returns trigger language plpgsql as $$
      declare last record;
      begin
        perform pg_advisory_xact_lock(hashtext('emberstave.alarms'), hashtext(new.firing_id::text));
        select to_state, occurrence_id, at into last from alarm_events
          where firing_id = new.firing_id and kind = new.kind and subject = new.subject
          order by id desc limit 1;
        if new.from_state <> coalesce(last.to_state, 'normal') then
          raise exception 'this alarm is %, not %', coalesce(last.to_state, 'normal'), new.from_state
            using errcode = 'restrict_violation', constraint = 'alarm_events_in_turn';
        end if;
        if new.from_state = 'normal' then
          if exists (select from alarm_events where occurrence_id = new.occurrence_id) then
            raise exception 'an alarm comes each time anew'
              using errcode = 'restrict_violation', constraint = 'alarm_events_in_turn';
          end if;
        elsif new.occurrence_id <> last.occurrence_id then
          raise exception 'this is another coming of the alarm'
            using errcode = 'restrict_violation', constraint = 'alarm_events_in_turn';
        end if;
        new.at := greatest(new.at, last.at);
        if new.to_state not in ('normal', 'suppressed')
          and exists (select from firings where id = new.firing_id and ended_at < new.at) then
          raise exception 'the firing has ended'
            using errcode = 'restrict_violation', constraint = 'alarm_events_in_turn';
        end if;
        new.hearth_id := coalesce(new.hearth_id, (select hearth_id from firing_placements
          where firing_id = new.firing_id and from_at <= new.at order by from_at desc limit 1));
        return new;
      end $$;
      create trigger alarm_events_guard before insert on alarm_events
        for each row execute function guard_alarm_event();
      create trigger alarm_events_append_only before update or delete on alarm_events
        for each row execute function refuse_change();

      grant select, insert on alarm_events to emberstave_app;
      grant select on alarm_moves to emberstave_app;

      with put_in_force as (
        insert into site_settings (version, name, serial_prefix, time_zone, rules, is_demo, created_at, created_by)
        select version + 1, name, serial_prefix, time_zone, rules || jsonb_build_object(
            'signals', '{"areChecked": true, "stuckAfterS": 30, "stuckWithinC": 0.05, "stuckWitnessC": 10,
              "stepC": 40, "stepAgreeS": 3, "pairApartC": 25, "pairApartS": 30, "gatewayLostAfterS": 5,
              "clockApartS": 2}'::jsonb,
            'alarms', '{"onDelayS": 5, "offDelayS": 15, "deadbandC": 4, "climbDeadbandShare": 0.2,
              "slowOnDelayS": 60, "belowBandTimes": 2, "overrunAfterS": 60, "remindAfterS": 30,
              "shelveAtMostMin": 15}'::jsonb),
          is_demo, clock_timestamp(), null
          from site_settings order by version desc limit 1
        returning version)
      insert into audit_entries (at, actor_id, actor_name, action, subject_type, subject_id, detail)
      select clock_timestamp(), null, 'set-up', 'site.changed', 'site', '1', jsonb_build_object('version', version,
          'why', 'Signals are checked and alarms kept from this version on.')
        from put_in_force;
    `)
  }

  override down(): void {
    this.addSql(`
      drop table alarm_events; drop table alarm_moves; drop function guard_alarm_event();
    `)
  }
}
