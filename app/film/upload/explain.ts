import { readErrorAnswer } from '~/utils/errors'
import { UploadStopped } from './send-parts'

/** The chosen file does not even say that it is film. */
export class NotFilm extends Error {}

const STOPPED_WORDS: Record<UploadStopped['reason'], string> = {
  gone: 'The store has given up on this clip, because it lay unfinished too long. Choose the file again to send it from the start.',
  refused: 'The store did not take this clip. Choose the file again to send it from the start.',
  unreachable: 'The store could not be reached for some minutes. What has arrived is kept. Try again when your connection is better.',
}

/** Why a clip was not sent, what was kept, and what to do, for whoever sent it. */
export function explainFailure(error: unknown): string {
  if (error instanceof UploadStopped) return STOPPED_WORDS[error.reason]
  if (error instanceof NotFilm) return 'This file is not a video that can be read. Choose an MP4, MOV or WebM file.'
  const { code, message, fields } = readErrorAnswer(error)
  if (code === 'no-answer') return 'The connection was lost. What has arrived is kept. Try again when you are back on line.'
  return Object.values(fields)[0] ?? message
}
