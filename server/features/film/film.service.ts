import type { ClipBrief } from '#shared/types/reviews'
import type { FilmReading } from '#shared/domain/film/reading'
import { NotInStore } from '#server/adapters/storage'
import type { Ctx, SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import type { ClipRow } from '#server/features/reviews/clip.repository'
import { deleteUpload, findVisibleClip, insertViewing, updateClip } from '#server/features/reviews/clip.repository'
import { viewClip } from '#server/features/reviews/review.view'
import { newId } from '#server/ids'
import { inTransaction } from '#server/database/transaction'
import { notFound } from '#server/refusal'
import { write } from '#server/write'
import { checkFilmConsent } from './consent'
import { partsMissing, storeUnavailable } from './film.errors'
import { readFilm } from './reading/read-film'
import { StoreUnreachable } from './reading/reading.errors'
import { getOwnClip, reaching } from './upload.service'

const READ_ADDRESS_SECONDS = 300
/** Long enough to play a clip through, short enough that a passed-on address is soon worth nothing. */
const FILM_ADDRESS_SECONDS = 300

/**
 * Joins the parts and reads the film. May be called again at any point, also after a crash between any two steps.
 * @returns the clip, accepted or refused with its reason.
 */
export async function completeClip(ctx: SignedInCtx, { id }: { id: string }): Promise<ClipBrief> {
  const clip = await getOwnClip(ctx, id)
  if (clip.state === 'accepted' || clip.state === 'refused') return viewClip(clip)
  if (clip.state === 'uploading') {
    await joinParts(ctx, clip, clip.store_upload_id)
    await inTransaction(ctx.db, async (db) => {
      await updateClip(db, id, 'uploading', { state: 'reading', completed_at_ms: ctx.nowMs })
      await deleteUpload(db, id)
    })
  }
  await readClip(ctx, clip)
  return viewClip(await getOwnClip(ctx, id))
}

/** @throws Refusal `parts-missing` when the store does not hold the whole file. */
async function joinParts(ctx: Ctx, clip: ClipRow, uploadId: string | null): Promise<void> {
  try {
    const parts = uploadId === null ? [] : await ctx.storage.listParts(clip.object_key, uploadId)
    const missingBytes = clip.bytes - parts.reduce((sum, part) => sum + part.bytes, 0)
    if (missingBytes !== 0 || parts.some((part, index) => part.number !== index + 1)) throw partsMissing(missingBytes)
    await ctx.storage.completeUpload(clip.object_key, uploadId ?? '', parts)
  }
  catch (error) {
    // The server may have ended after joining and before saying so: then the upload is gone and the object is there.
    const wasJoined = error instanceof NotInStore && await ctx.storage.findBytes(clip.object_key) === clip.bytes
    if (!wasJoined) await reaching(() => Promise.reject(error))
  }
}

/** Reads a film that the store holds whole and writes down what it says; a refused one leaves the store. */
export async function readClip(ctx: Ctx, clip: ClipRow): Promise<void> {
  const reading = await readStored(ctx, clip)
  await write(ctx, async (db) => {
    const change = reading.kind === 'refused'
      ? { state: 'refused' as const, refusal: reading.reason, read_at_ms: ctx.nowMs }
      : { ...filmColumns(reading), state: 'accepted' as const, read_at_ms: ctx.nowMs }
    const isFirst = await updateClip(db, clip.id, 'reading', change)
    if (isFirst) await recordDeed(db, ctx, reading.kind === 'refused' ? 'clip-refused' : 'clip-accepted', clip.id)
    return viewClip({ ...clip, ...change, refusal: reading.kind === 'refused' ? reading.reason : null })
  })
  if (reading.kind === 'refused') {
    await ctx.storage.remove(clip.object_key).catch(error => ctx.log.warn({ clipId: clip.id, err: error }, 'film left in the store'))
  }
}

async function readStored(ctx: Ctx, clip: ClipRow): Promise<FilmReading> {
  try {
    const url = await ctx.storage.presignGet(clip.object_key, READ_ADDRESS_SECONDS)
    return await readFilm({ url, bytes: clip.bytes, workerPath: ctx.settings.filmReaderPath })
  }
  catch (error) {
    if (error instanceof StoreUnreachable) throw storeUnavailable()
    throw error
  }
}

function filmColumns({ film }: FilmReading & { kind: 'accepted' }) {
  return {
    codec: film.codecString,
    width_px: film.widthPx,
    height_px: film.heightPx,
    rotation_deg: film.rotationDeg,
    duration_ms: Math.round(film.durationMs),
    frames_per_second: film.framesPerSecond,
    capture_frames_per_second: film.captureFramesPerSecond ?? null,
    time_base: film.timeBase,
    // Doubles hold every whole tick up to 2^53 exactly.
    frame_ticks: new Uint8Array(new Float64Array(film.frameTicks).buffer),
  }
}

/** A short-lived address of a clip; the viewing is written down. @throws Refusal `not-found`, `consent-needed`. */
export async function showFilm(ctx: SignedInCtx, { id }: { id: string }): Promise<string> {
  const clip = await findVisibleClip(ctx.db, ctx.viewer, id)
  if (clip?.state !== 'accepted') throw notFound('clip')
  await checkFilmConsent(ctx.db, ctx, clip.student_id)
  await inTransaction(ctx.db, db => insertViewing(db, { id: newId(ctx.nowMs), clipId: id, viewerId: ctx.viewer.id, atMs: ctx.nowMs }))
  return ctx.storage.presignGet(clip.object_key, FILM_ADDRESS_SECONDS)
}
