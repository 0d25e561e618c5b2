import type { Migration } from 'kysely'
import { runStatements } from './statements'

/** Questions, their film and their answers. Words stand here, where they can be erased. */
export const reviews: Migration = {
  up: db => runStatements(db, `
    create table reviews (
      id text primary key,
      student_id text not null references users on delete cascade,
      number integer not null check (number >= 1),
      state text not null check (state in ('draft', 'unpaid', 'waiting', 'in_hand', 'new_film', 'answered', 'closed', 'withdrawn')),
      version integer not null default 1,
      chosen_coach_id text references users,
      coach_id text references users,
      offer_version_id text references offer_versions,
      title text not null default '',
      question text not null default '',
      area text not null,
      club text not null,
      misses text not null default '',
      tried text not null default '',
      film_asked_count integer not null default 0 check (film_asked_count between 0 and 2),
      not_answered_count integer not null default 0 check (not_answered_count between 0 and 1),
      state_before_new_film text check (state_before_new_film in ('waiting', 'in_hand')),
      created_at_ms integer not null,
      submitted_at_ms integer,
      taken_up_at_ms integer,
      answered_at_ms integer,
      closed_at_ms integer,
      unique (student_id, number),
      check ((state = 'in_hand') <= (coach_id is not null)),
      check ((state in ('waiting', 'in_hand', 'answered', 'closed')) <= (submitted_at_ms is not null)),
      check ((state = 'new_film') = (state_before_new_film is not null))
    ) strict;
    create index reviews_by_student on reviews (student_id, created_at_ms desc, id desc);
    create index reviews_by_coach on reviews (coach_id, created_at_ms desc, id desc);
    create index reviews_answered_by_coach on reviews (coach_id, answered_at_ms desc) where answered_at_ms is not null;
    create index reviews_by_creation on reviews (created_at_ms desc, id desc);

    create table clips (
      id text primary key,
      review_id text not null references reviews on delete cascade,
      view text not null check (view in ('face_on', 'down_the_line')),
      state text not null check (state in ('uploading', 'reading', 'accepted', 'refused')),
      file_name text not null,
      content_type text not null,
      bytes integer not null check (bytes > 0),
      object_key text not null unique,
      refusal text,
      codec text,
      width_px integer,
      height_px integer,
      rotation_deg integer,
      duration_ms integer,
      frames_per_second real,
      capture_frames_per_second real,
      time_base integer,
      frame_ticks blob,
      created_at_ms integer not null,
      completed_at_ms integer,
      read_at_ms integer,
      check ((state = 'refused') = (refusal is not null)),
      check ((state = 'accepted') <= (frame_ticks is not null and time_base > 0))
    ) strict;
    create index clips_by_review on clips (review_id, created_at_ms, id);
    create index clips_unread on clips (completed_at_ms) where state = 'reading';

    create table uploads (
      clip_id text primary key references clips on delete cascade,
      store_upload_id text not null,
      part_bytes integer not null check (part_bytes > 0),
      created_at_ms integer not null
    ) strict;
    create index uploads_by_creation on uploads (created_at_ms);

    create table drafts (
      review_id text not null references reviews on delete cascade,
      coach_id text not null references users,
      version integer not null check (version >= 1),
      letter text not null check (json_valid(letter)),
      saved_at_ms integer not null,
      primary key (review_id, coach_id)
    ) strict;

    create table diagnoses (
      id text primary key,
      review_id text not null references reviews on delete cascade,
      sequence integer not null check (sequence >= 1),
      coach_id text not null references users,
      title text not null,
      leave_alone text not null,
      saw text not null,
      why text not null,
      how_sure text not null check (how_sure in ('sure', 'fairly_sure', 'a_guess')),
      one_change text not null,
      caution text not null,
      answered_at_ms integer not null,
      unique (review_id, sequence)
    ) strict;

    create table prescriptions (
      id text primary key,
      diagnosis_id text not null unique references diagnoses on delete cascade,
      drill_title text not null,
      drill_steps text not null,
      drill_dose text not null
    ) strict;
  `),
}
