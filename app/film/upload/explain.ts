import { readErrorAnswer } from '~/utils/errors'
import type { PartFailure } from './retry'
import { UploadStopped, type StopReason } from './send-parts'

/** The chosen file does not even say that it is film. */
export class NotFilm extends Error {}

const STOPPED_WORDS: Record<StopReason, string> = {
  'gone': 'The store has given up on this clip, because it lay unfinished too long. Choose the file again to send it from the start.',
  'refused': 'The store did not take this clip. Choose the file again to send it from the start.',
  'unreadable': 'This device can no longer read the file. Choose it again to send it from the start.',
  'other-file': 'This is another film than the one begun, though it has its name and size. Take that one away first, then send this one.',
}

export interface FailureWords {
  /** Why a clip was not sent, what was kept, and what to do, for whoever sent it. */
  words: string
  /** True when the same bytes may still go through: what has arrived is kept and only the rest must be sent. */
  canGoOn: boolean
}

/** Puts whatever stopped a clip into words. */
export function explainFailure(error: unknown): FailureWords {
  if (error instanceof UploadStopped) return { words: STOPPED_WORDS[error.reason], canGoOn: false }
  if (error instanceof NotFilm) {
    return { words: 'This file is not a video that can be read. Choose an MP4, MOV or WebM file.', canGoOn: false }
  }
  const { statusCode, message, fields } = readErrorAnswer(error)
  if (statusCode === 0) {
    return { words: 'The connection was lost. What has arrived is kept. Try again when you are back on line.', canGoOn: true }
  }
  if (statusCode === 401) {
    return { words: 'You are signed out, so sending has stopped. What has arrived is kept. Sign in again and it goes on.', canGoOn: true }
  }
  return { words: Object.values(fields)[0] ?? message, canGoOn: statusCode >= 500 || statusCode === 429 }
}

/** A failed request of our own API in the terms of the retry rules. */
export function readFailure(error: unknown): PartFailure {
  const { statusCode } = readErrorAnswer(error)
  return statusCode === 0 ? { kind: 'network' } : { kind: 'status', status: statusCode }
}
