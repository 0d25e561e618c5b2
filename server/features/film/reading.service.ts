import { judgeFilm } from '#shared/domain/film/judge'
import type { FilmContainer, FilmFacts, FilmReading } from '#shared/domain/film/reading'
import type { Ctx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import type { ClipRow } from '#server/features/reviews/clip.repository'
import { updateClip } from '#server/features/reviews/clip.repository'
import { viewClipWithSwings } from '#server/features/reviews/review.view'
import { write } from '#server/write'
import { convertInStore } from './convert/convert-in-store'
import { storeUnavailable } from './film.errors'
import { reaching } from './reaching'
import { readFilm } from './reading/read-film'
import { StoreUnreachable } from './reading/reading.errors'
import { insertImpliedSwing } from './swing.repository'

const READ_ADDRESS_SECONDS = 300

/**
 * Reads a film that the store holds whole and writes down what it says; a refused one leaves the store.
 * @throws Refusal `store-unavailable`; then nothing is known of the film and the clip stays as it is.
 */
export async function readClip(ctx: Ctx, clip: ClipRow): Promise<void> {
  const reading = judgeAgain(await readOrConvert(ctx, clip), clip.capture_frames_per_second)
  const change = reading.kind === 'refused'
    ? { state: 'refused' as const, refusal: reading.reason, read_at_ms: ctx.nowMs }
    : { ...filmColumns(reading.film), state: 'accepted' as const, read_at_ms: ctx.nowMs }
  await write(ctx, async (db) => {
    if (await updateClip(db, clip.id, 'reading', change)) {
      if (reading.kind === 'accepted') {
        await insertImpliedSwing(db, { clipId: clip.id, durationMs: Math.round(reading.film.durationMs), nowMs: ctx.nowMs })
      }
      await recordDeed(db, ctx, reading.kind === 'refused' ? 'clip-refused' : 'clip-accepted', clip.id)
    }
    return viewClipWithSwings(db, { ...clip, refusal: null, ...change })
  })
  if (reading.kind === 'refused') {
    await ctx.storage.remove(clip.object_key).catch(error => ctx.log.warn({ clipId: clip.id, err: error }, 'film left in the store'))
  }
}

async function readOrConvert(ctx: Ctx, clip: ClipRow): Promise<FilmReading> {
  const reading = await readStored(ctx, clip)
  const { ffmpegPath } = ctx.settings
  if (reading.kind === 'accepted' || reading.reason !== 'codec-not-shown' || ffmpegPath === undefined) return reading
  const converted = await reaching(() => convertInStore(ctx, { key: clip.object_key, ffmpegPath }))
  if (!converted) return reading
  const again = await readStored(ctx, clip)
  if (again.kind === 'refused') return again
  // The tag that told it is gone with all the others.
  return { kind: 'accepted', film: { ...again.film, captureFramesPerSecond: converted.captureFramesPerSecond } }
}

/** The size is asked of the store, since a conversion that ended with its server left another than was announced. */
async function readStored(ctx: Ctx, clip: ClipRow): Promise<FilmReading> {
  const bytes = await reaching(() => ctx.storage.findBytes(clip.object_key))
  if (bytes === undefined) return { kind: 'refused', reason: 'unreadable', detail: 'not in the store' }
  try {
    const url = await ctx.storage.presignGet(clip.object_key, READ_ADDRESS_SECONDS)
    return await readFilm({ url, bytes, workerPath: ctx.settings.filmReaderPath })
  }
  catch (error) {
    if (error instanceof StoreUnreachable) throw storeUnavailable()
    throw error
  }
}

/** A film that says nothing of its rate is judged by what its sender says of it: preparing took the tag out. */
function judgeAgain(reading: FilmReading, toldFramesPerSecond: number | null): FilmReading {
  if (reading.kind === 'refused' || reading.film.captureFramesPerSecond !== undefined || toldFramesPerSecond === null) return reading
  const film = { ...reading.film, captureFramesPerSecond: toldFramesPerSecond }
  const reason = judgeFilm(film)
  return reason ? { kind: 'refused', reason } : { kind: 'accepted', film }
}

const CONTENT_TYPES: Record<FilmContainer, string> = { mp4: 'video/mp4', mov: 'video/quicktime', webm: 'video/webm' }

function filmColumns(film: FilmFacts) {
  return {
    content_type: CONTENT_TYPES[film.container],
    bytes: film.bytes,
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
