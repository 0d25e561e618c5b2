import type { Kysely, Migration } from 'kysely'
import { sql } from 'kysely'
import { newId } from '#server/ids'
import { runStatements } from './statements'

/** What is asked once, what each ball did, photographs, and what it takes to leave nothing lying in the store. */
export const film: Migration = {
  async up(db) {
    await runStatements(db, `
      alter table students add column handicap text not null default '';
      alter table students add column goals text not null default '';
      alter table students add column practice_places text not null default '[]' check (json_valid(practice_places));
      alter table students add column sessions_per_week integer check (sessions_per_week between 0 and 21);
      alter table students add column minutes_per_session integer check (minutes_per_session between 1 and 480);

      create table clubs (
        student_id text not null references students on delete cascade,
        position integer not null check (position >= 1),
        club text not null check (length(club) between 1 and 40),
        length_m real check (length_m > 0),
        lie_deg real check (lie_deg between 45 and 80),
        carry_m real check (carry_m between 0 and 450),
        primary key (student_id, position)
      ) strict;
      create unique index clubs_by_name on clubs (student_id, club collate nocase);

      alter table clips add column prepared_as text check (prepared_as in ('re_encoded', 'cut', 'remuxed', 'original'));
      alter table clips add column read_due_at_ms integer;
      alter table clips add column read_attempts integer not null default 0;
      update clips set read_due_at_ms = ifnull(completed_at_ms, created_at_ms) where state = 'reading';
      drop index clips_unread;
      create index clips_unread on clips (read_due_at_ms) where state = 'reading';

      alter table uploads add column completion_asked_at_ms integer;
      create index uploads_by_store_id on uploads (store_upload_id);
      create index uploads_asked on uploads (completion_asked_at_ms) where completion_asked_at_ms is not null;

      create table swings (
        id text primary key,
        clip_id text not null references clips on delete cascade,
        number integer not null check (number between 1 and 6),
        from_ms integer not null check (from_ms >= 0),
        to_ms integer not null,
        contact text check (contact in ('solid', 'fat', 'thin', 'topped', 'toe', 'heel', 'shank', 'sky', 'missed')),
        flight_start text check (flight_start in ('left', 'straight', 'right')),
        flight_curve text check (flight_curve in ('left', 'straight', 'right')),
        flight_height text check (flight_height in ('low', 'normal', 'high')),
        carry_m real check (carry_m between 0 and 450),
        surface text check (surface in ('grass', 'mat', 'net', 'sand')),
        unique (clip_id, number),
        check (from_ms < to_ms),
        check ((flight_start is null) = (flight_curve is null) and (flight_start is null) = (flight_height is null))
      ) strict;

      create table photos (
        id text primary key,
        review_id text not null references reviews on delete cascade,
        kind text not null check (kind in ('ground_mark', 'face_mark', 'grip')),
        object_key text not null unique,
        width_px integer not null check (width_px > 0),
        height_px integer not null check (height_px > 0),
        bytes integer not null check (bytes > 0),
        created_at_ms integer not null
      ) strict;
      create index photos_by_review on photos (review_id, created_at_ms, id);
    `)
    await insertImpliedSwings(db)
  },
}

/** Clips that were accepted before swings were asked for hold one, of their whole length. */
async function insertImpliedSwings(db: Kysely<unknown>): Promise<void> {
  const clips = await sql<{ id: string, read_at_ms: number, duration_ms: number }>`
    select id, ifnull(read_at_ms, created_at_ms) as read_at_ms, ifnull(duration_ms, 1) as duration_ms from clips where state = 'accepted'`.execute(db)
  for (const clip of clips.rows) {
    await sql`insert into swings (id, clip_id, number, from_ms, to_ms)
      values (${newId(clip.read_at_ms)}, ${clip.id}, 1, 0, ${Math.max(1, clip.duration_ms)})`.execute(db)
  }
}
