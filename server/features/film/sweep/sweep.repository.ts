import { sql } from 'kysely'
import type { Database } from '#server/database/client'

/** Uploads that were begun before `beforeMs` and are still not whole, with what is to be known of their review. */
export async function listAbandonedClips(db: Database, beforeMs: number, limit: number) {
  return db.selectFrom('uploads')
    .innerJoin('clips', 'clips.id', 'uploads.clip_id')
    .innerJoin('reviews', 'reviews.id', 'clips.review_id')
    .selectAll('clips')
    .select(['uploads.store_upload_id', 'reviews.state as review_state'])
    .where('uploads.created_at_ms', '<', beforeMs)
    .where('clips.state', '=', 'uploading')
    .orderBy('uploads.created_at_ms')
    .limit(limit)
    .execute()
}

export type AbandonedClip = Awaited<ReturnType<typeof listAbandonedClips>>[number]

/** @returns whether it was still being sent. */
export async function deleteUploadingClip(db: Database, id: string): Promise<boolean> {
  const result = await db.deleteFrom('clips').where('id', '=', id).where('state', '=', 'uploading').executeTakeFirst()
  return result.numDeletedRows === 1n
}

/** Which of these ids of the store's uploads have a row. */
export async function listKnownUploadIds(db: Database, storeUploadIds: string[]): Promise<string[]> {
  const rows = await db.selectFrom('uploads')
    .select('store_upload_id')
    .where('store_upload_id', 'in', oneOf(storeUploadIds))
    .execute()
  return rows.map(row => row.store_upload_id)
}

/** A row that names an object in the store. `isRefused`: its film was refused, so the object ought to be gone. */
export interface NamedObject {
  id: string
  object_key: string
  isRefused: boolean
}

/** Rows that name one of these objects. */
export type FindNaming = (db: Database, keys: string[]) => Promise<NamedObject[]>

/** Rows that ought to have an object with a key after `afterKey` and up to `toKey` (to the end, when undefined), made before `beforeMs`. */
export type ListNeeding = (db: Database, range: { afterKey: string, toKey: string | undefined, beforeMs: number }) => Promise<NamedObject[]>

export const findClipsNaming: FindNaming = async (db, keys) => {
  const rows = await db.selectFrom('clips').select(['id', 'object_key', 'state']).where('object_key', 'in', oneOf(keys)).execute()
  return rows.map(({ state, ...row }) => ({ ...row, isRefused: state === 'refused' }))
}

export const listClipsNeeding: ListNeeding = async (db, { afterKey, toKey, beforeMs }) => {
  const rows = await db.selectFrom('clips')
    .select(['id', 'object_key'])
    .where('object_key', '>', afterKey)
    .$if(toKey !== undefined, query => query.where('object_key', '<=', toKey ?? ''))
    .where('state', '=', 'accepted').where('read_at_ms', '<', beforeMs)
    .orderBy('object_key')
    .execute()
  return rows.map(row => ({ ...row, isRefused: false }))
}

export const findPhotosNaming: FindNaming = async (db, keys) => {
  const rows = await db.selectFrom('photos').select(['id', 'object_key']).where('object_key', 'in', oneOf(keys)).execute()
  return rows.map(row => ({ ...row, isRefused: false }))
}

export const listPhotosNeeding: ListNeeding = async (db, { afterKey, toKey, beforeMs }) => {
  const rows = await db.selectFrom('photos')
    .select(['id', 'object_key'])
    .where('object_key', '>', afterKey)
    .$if(toKey !== undefined, query => query.where('object_key', '<=', toKey ?? ''))
    .where('created_at_ms', '<', beforeMs)
    .orderBy('object_key')
    .execute()
  return rows.map(row => ({ ...row, isRefused: false }))
}

/** One statement for any number of values, where a list of parameters would be another for each. */
function oneOf(values: string[]) {
  return sql<string>`(select value from json_each(${JSON.stringify(values)}))`
}
