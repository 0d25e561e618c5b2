import type { RangeReader } from './range-reader'
import type { ReaderMessage } from './reader-message'
import { examineFilm } from './examine-film'
import { StoreUnreachable, UnsoundFilm } from './reading.errors'

const DETAIL_MAX_LENGTH = 200

/** Reads one film and turns whatever happens into the message of the worker; never throws. */
export async function answerTask(reader: RangeReader): Promise<ReaderMessage> {
  try {
    return { kind: 'read', reading: await examineFilm(reader) }
  }
  catch (error) {
    return answerFailure(reader.fault ?? error)
  }
}

/** Whatever the parser throws beyond our own errors means that it could not make sense of the file. */
function answerFailure(error: unknown): ReaderMessage {
  if (error instanceof StoreUnreachable)
    return { kind: 'store-unreachable', message: error.message }
  const reason = error instanceof UnsoundFilm ? error.reason : 'unreadable'
  const detail = error instanceof Error ? error.message : String(error)
  return { kind: 'read', reading: { kind: 'refused', reason, detail: detail.slice(0, DETAIL_MAX_LENGTH).replace(/[^ -~]/g, '?') } }
}
