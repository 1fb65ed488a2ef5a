import { Migration } from '@mikro-orm/migrations'

/**
 * What is kept beside the curve. Photos of a firing: the row stays for ever, the picture goes when a person removes
 * it with a reason. Losses of a piece by stave position, append-only. Conditions of the day, carbon monoxide and heat:
 * what was taken back stays with its reason. The site's own words and limits are a part of its settings.
 */
export class M0011PhotosLossesConditions extends Migration {
  override up(): void {
    this.addSql(settingsUp)
    this.addSql(removalUp)
    this.addSql(photosUp)
    this.addSql(lossesUp)
    this.addSql(conditionsUp)
  }

  override down(): void {
    this.addSql(`
      drop table exposure_readings; drop table exposure_uploads; drop table condition_readings;
      drop table losses; drop function guard_loss();
      drop table firing_photos; drop function guard_photo(); drop function limit_photos();
      drop function guard_removal();
      alter table site_settings drop column room;
    `)
  }
}

// A version from before has none and is read with the defaults of lib/site/room-settings.ts.
const settingsUp = `
  alter table site_settings add column room jsonb not null default '{}' check (jsonb_typeof(room) = 'object');
`

/** Rows that are taken back once, with a reason, and never otherwise changed. */
const removalUp = `
  create function guard_removal() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' then
      raise exception '% keeps its rows', tg_table_name using errcode = 'restrict_violation';
    end if;
    if old.removed_at is not null or new.removed_at is null then
      raise exception 'a row of % is taken back once', tg_table_name using errcode = 'restrict_violation';
    end if;
    if (to_jsonb(new) - array['removed_at', 'removed_by', 'removed_reason'])
      <> (to_jsonb(old) - array['removed_at', 'removed_by', 'removed_reason']) then
      raise exception 'a row of % is taken back, not changed', tg_table_name using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
`

const photosUp = `
  create table firing_photos (
    id uuid primary key,
    firing_id uuid not null references firings (id),
    kind text not null check (kind in ('face', 'blister', 'other')),
    caption text not null default '' check (char_length(caption) <= 200),
    source_type text not null check (source_type in ('image/jpeg', 'image/png', 'image/webp')),
    file_key text not null unique check (char_length(file_key) between 30 and 120),
    thumbnail_key text not null unique check (char_length(thumbnail_key) between 30 and 120),
    width_px integer not null check (width_px between 1 and 2048),
    height_px integer not null check (height_px between 1 and 2048),
    byte_count integer not null check (byte_count > 0),
    sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
    added_at timestamptz not null,
    account_id uuid not null references accounts (id),
    removed_at timestamptz,
    removed_by uuid references accounts (id),
    removed_reason text check (char_length(removed_reason) between 3 and 500),
    erased_at timestamptz,
    constraint firing_photos_removed_whole check (
      (removed_at is null) = (removed_by is null) and (removed_at is null) = (removed_reason is null)),
    constraint firing_photos_erased_after_removal check (erased_at is null or erased_at >= removed_at)
  );
  create index firing_photos_firing_idx on firing_photos (firing_id, added_at, id);
  create index firing_photos_to_erase_idx on firing_photos (removed_at)
    where removed_at is not null and erased_at is null;

  -- Kind and caption may be put right while the photo is there; removal comes once, and the erasing after it.
  create function guard_photo() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' then
      raise exception 'the row of a photo stays' using errcode = 'restrict_violation';
    end if;
    if (to_jsonb(new) - array['kind', 'caption', 'removed_at', 'removed_by', 'removed_reason', 'erased_at'])
      <> (to_jsonb(old) - array['kind', 'caption', 'removed_at', 'removed_by', 'removed_reason', 'erased_at']) then
      raise exception 'a photo is never exchanged' using errcode = 'restrict_violation';
    end if;
    if old.removed_at is not null and (to_jsonb(new) - 'erased_at') <> (to_jsonb(old) - 'erased_at') then
      raise exception 'this photo was removed' using errcode = 'restrict_violation';
    end if;
    if old.erased_at is not null then
      raise exception 'this photo was erased' using errcode = 'restrict_violation';
    end if;
    return new;
  end $$;
  create trigger firing_photos_guard before update or delete on firing_photos
    for each row execute function guard_photo();

  -- At most 12 that are there (mirrors lib/firings/photo-schema.ts); whoever adds one waits for whoever else does.
  create function limit_photos() returns trigger language plpgsql as $$
  begin
    perform pg_advisory_xact_lock(hashtext('emberstave.photos'), hashtext(new.firing_id::text));
    if (select count(*) from firing_photos where firing_id = new.firing_id and removed_at is null) >= 12 then
      raise exception 'this firing has its 12 photos'
        using errcode = 'restrict_violation', constraint = 'firing_photos_at_most_twelve';
    end if;
    if (select state from firings where id = new.firing_id) = 'queued' then
      raise exception 'this firing has not begun'
        using errcode = 'restrict_violation', constraint = 'firing_photos_after_start';
    end if;
    return new;
  end $$;
  create trigger firing_photos_limit before insert on firing_photos
    for each row execute function limit_photos();

  grant select, insert, update on firing_photos to emberstave_app;
`

const lossesUp = `
  create table losses (
    id uuid primary key,
    piece_id uuid not null references pieces (id),
    firing_id uuid references firings (id),
    kind text not null check (kind in ('broken at the pull', 'blister', 'leak', 'stave replaced', 'taken back')),
    stave_position integer check (stave_position between 1 and 60),
    wood_lot text check (char_length(wood_lot) between 1 and 60),
    blister_place text check (blister_place in ('bilge', 'quarter', 'head end')),
    blister_size_mm double precision check (blister_size_mm > 0 and blister_size_mm <= 500),
    replaced_when text check (replaced_when in ('before the toast', 'after the toast')),
    replacement_lot text check (char_length(replacement_lot) between 1 and 60),
    replacement_toast text check (char_length(replacement_toast) between 1 and 80),
    words text not null default '' check (char_length(words) <= 500),
    at timestamptz not null,
    recorded_at timestamptz not null,
    account_id uuid not null references accounts (id),
    replaces_id uuid references losses (id),
    constraint losses_place_given check (kind in ('leak', 'taken back') or stave_position is not null),
    constraint losses_lot_given check ((kind = 'taken back') = (wood_lot is null)),
    constraint losses_pull_has_firing check (kind <> 'broken at the pull' or firing_id is not null),
    constraint losses_blister_given check (
      (kind = 'blister') = (blister_place is not null) and (kind = 'blister') = (blister_size_mm is not null)),
    constraint losses_replacement_given check (
      (kind = 'stave replaced') = (replaced_when is not null)
      and (kind = 'stave replaced') = (replacement_lot is not null)),
    -- A stave put in after the toast has a toast of its own, or is said to be untoasted; one put in before shares it.
    constraint losses_own_toast_given check (
      (replaced_when is not distinct from 'after the toast') = (replacement_toast is not null)),
    constraint losses_taken_back_with_reason check (
      kind <> 'taken back' or (replaces_id is not null and char_length(words) >= 3))
  );
  create index losses_piece_idx on losses (piece_id, at);
  create unique index losses_replaced_once on losses (replaces_id) where replaces_id is not null;

  create function guard_loss() returns trigger language plpgsql as $$
  declare fired record;
  begin
    if new.firing_id is not null then
      select piece_id, bend_at into fired from firings where id = new.firing_id;
      if fired.piece_id <> new.piece_id then
        raise exception 'this firing is of another piece'
          using errcode = 'restrict_violation', constraint = 'losses_of_one_piece';
      end if;
      if new.kind = 'broken at the pull' and fired.bend_at is null then
        raise exception 'this firing was not bent'
          using errcode = 'restrict_violation', constraint = 'losses_pull_after_bend';
      end if;
    end if;
    if new.replaces_id is not null and not exists (select from losses
        where id = new.replaces_id and piece_id = new.piece_id and kind <> 'taken back') then
      raise exception 'there is no such loss of this piece'
        using errcode = 'restrict_violation', constraint = 'losses_replaced_of_one_piece';
    end if;
    return new;
  end $$;
  create trigger losses_guard before insert on losses for each row execute function guard_loss();
  create trigger losses_append_only before update or delete on losses
    for each row execute function refuse_change();

  grant select, insert on losses to emberstave_app;
`

const removedColumns = `
    removed_at timestamptz,
    removed_by uuid references accounts (id),
    removed_reason text check (char_length(removed_reason) between 3 and 500),
    check ((removed_at is null) = (removed_by is null) and (removed_at is null) = (removed_reason is null))`

const conditionsUp = `
  create table condition_readings (
    id uuid primary key,
    place text not null check (place in ('room', 'yard')),
    at timestamptz not null,
    temp_c double precision not null check (temp_c between -40 and 60),
    humidity_percent double precision not null check (humidity_percent between 0 and 100),
    account_id uuid not null references accounts (id),
    recorded_at timestamptz not null,${removedColumns}
  );
  create index condition_readings_at_idx on condition_readings (place, at) where removed_at is null;

  create table exposure_uploads (
    id uuid primary key,
    kind text not null check (kind in ('carbon monoxide', 'heat')),
    subject text not null check (char_length(subject) between 1 and 60),
    file_name text not null check (char_length(file_name) between 1 and 120),
    sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
    line_count integer not null check (line_count > 0),
    skipped_count integer not null check (skipped_count >= 0),
    account_id uuid not null references accounts (id),
    recorded_at timestamptz not null,${removedColumns}
  );

  create table exposure_readings (
    id uuid primary key,
    kind text not null check (kind in ('carbon monoxide', 'heat')),
    subject text not null check (char_length(subject) between 1 and 60),
    at timestamptz not null,
    -- ppm, or wet-bulb globe temperature in °C; the mean of a minute where a meter wrote more often, and its peak.
    value double precision not null,
    peak double precision not null,
    wet_bulb_c double precision check (wet_bulb_c between -20 and 80),
    globe_c double precision check (globe_c between -20 and 150),
    upload_id uuid references exposure_uploads (id),
    account_id uuid not null references accounts (id),
    recorded_at timestamptz not null,${removedColumns},
    constraint exposure_readings_in_bounds check (case kind
      when 'carbon monoxide' then value between 0 and 10000 and peak <= 10000 else value between -20 and 80 end),
    constraint exposure_readings_peak check (peak >= value - 1e-9),
    constraint exposure_readings_wbgt_whole check (
      (wet_bulb_c is null) = (globe_c is null) and (kind = 'heat' or wet_bulb_c is null))
  );
  create unique index exposure_readings_once on exposure_readings (kind, lower(subject), at) where removed_at is null;
  create index exposure_readings_at_idx on exposure_readings (at) where removed_at is null;
  create index exposure_readings_upload_idx on exposure_readings (upload_id) where upload_id is not null;

  create trigger condition_readings_guard before update or delete on condition_readings
    for each row execute function guard_removal();
  create trigger exposure_uploads_guard before update or delete on exposure_uploads
    for each row execute function guard_removal();
  create trigger exposure_readings_guard before update or delete on exposure_readings
    for each row execute function guard_removal();

  grant select, insert, update on condition_readings, exposure_uploads, exposure_readings to emberstave_app;
`
