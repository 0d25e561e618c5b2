import { createWriteStream } from 'node:fs'
import { mkdtemp, open, rm, stat } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { FILM_MAX_BYTES, FILM_MAX_FRAMES_PER_SECOND } from '#shared/domain/film/limits'
import { StoreUnavailable } from '#server/adapters/storage'
import type { Ctx } from '#server/context'
import { createTurnstile } from '../reading/turnstile'
import { ffmpegArguments } from './ffmpeg-arguments'
import { runFfmpeg } from './run-ffmpeg'

export interface Converted {
  /** Rate at which a phone filmed slow motion, which the converted film no longer tells. */
  captureFramesPerSecond: number | undefined
}

interface Conversion {
  key: string
  ffmpegPath: string
}

/** A minute of 1080p at 240 frames a second takes about that long on two cores. */
const TIME_LIMIT_MS = 5 * 60_000
const ADDRESS_SECONDS = 600

/** One at a time: it takes every core there is. */
const takeTurn = createTurnstile(1)
/** A sender who repeats a request that takes minutes waits for the conversion that is under way. */
const underWay = new Map<string, Promise<Converted | undefined>>()

/**
 * Replaces a stored film by one that every browser shows.
 * @returns undefined when ffmpeg cannot, or not in time; then the stored film is as it was.
 * @throws StoreUnavailable
 */
export async function convertInStore(ctx: Ctx, conversion: Conversion): Promise<Converted | undefined> {
  const known = underWay.get(conversion.key)
  if (known) return known
  const started = takeTurn(() => convert(ctx, conversion)).finally(() => underWay.delete(conversion.key))
  underWay.set(conversion.key, started)
  return started
}

async function convert(ctx: Ctx, { key, ffmpegPath }: Conversion): Promise<Converted | undefined> {
  const folder = await mkdtemp(join(tmpdir(), 'turfnote-film-'))
  try {
    const [from, to] = [join(folder, 'sent'), join(folder, 'converted.mp4')]
    await download(await ctx.storage.presignGet(key, ADDRESS_SECONDS), from)
    const commandArguments = ffmpegArguments({ from, to, demuxer: await isMatroska(from) ? 'matroska' : 'mov' })
    const outcome = await runFfmpeg({ path: ffmpegPath, commandArguments, timeLimitMs: TIME_LIMIT_MS })
    if (!outcome.ok || (await stat(to)).size > FILM_MAX_BYTES) {
      ctx.log.warn({ key, complaint: outcome.ok ? 'over the size limit' : outcome.complaint }, 'film not converted')
      return undefined
    }
    await ctx.storage.putFile(key, to, 'video/mp4')
    return { captureFramesPerSecond: readCaptureRate(outcome.output) }
  }
  finally {
    await rm(folder, { recursive: true, force: true })
  }
}

async function download(url: string, path: string): Promise<void> {
  try {
    const answer = await fetch(url, { redirect: 'error', signal: AbortSignal.timeout(TIME_LIMIT_MS) })
    if (!answer.ok || !answer.body) throw new Error(`the store answered ${answer.status}`)
    await pipeline(Readable.from(answer.body), createWriteStream(path))
  }
  catch (error) {
    throw new StoreUnavailable('The film could not be fetched for conversion.', { cause: error })
  }
}

/** WebM begins with the four bytes of EBML; everything else that reaches this is MP4 or QuickTime. */
async function isMatroska(path: string): Promise<boolean> {
  const file = await open(path)
  try {
    const { buffer } = await file.read(Buffer.alloc(4), 0, 4, 0)
    return buffer.readUInt32BE(0) === 0x1A45DFA3
  }
  finally {
    await file.close()
  }
}

/** Of ffmpeg's list of tags; undefined where the film says nothing that a phone could have filmed. */
function readCaptureRate(tags: string): number | undefined {
  const rate = Number(/^com\.android\.capture\.fps=(.*)$/m.exec(tags)?.[1])
  return rate >= 1 && rate <= FILM_MAX_FRAMES_PER_SECOND ? rate : undefined
}
