import type { ObjectRecord } from './object-store'
import { Refusal } from './refusals'

/**
 * Obeys If-Match, If-Unmodified-Since, If-None-Match and If-Modified-Since on reading, in the order of RFC 9110,
 * section 13.2.2. Answers whether the client's copy is still good; refuses when a precondition failed.
 */
export function isNotModified(headers: ReadonlyMap<string, string>, record: ObjectRecord): boolean {
  const ifMatch = headers.get('if-match')
  const ifNoneMatch = headers.get('if-none-match')
  if (ifMatch !== undefined) {
    if (!hasTag(ifMatch, record.etag)) throw new Refusal('precondition-failed', '', { Condition: 'If-Match' })
  }
  else if (wasModifiedAfter(record, headers.get('if-unmodified-since')) === true) {
    throw new Refusal('precondition-failed', '', { Condition: 'If-Unmodified-Since' })
  }
  if (ifNoneMatch !== undefined) return hasTag(ifNoneMatch, record.etag)
  return wasModifiedAfter(record, headers.get('if-modified-since')) === false
}

/** Whether a Range may be obeyed: If-Range must be absent or name this very version (RFC 9110, section 13.1.5). */
export function isRangeStillGood(headers: ReadonlyMap<string, string>, record: ObjectRecord): boolean {
  const ifRange = headers.get('if-range')
  if (ifRange === undefined) return true
  if (ifRange.startsWith('"')) return ifRange === record.etag
  return Date.parse(ifRange) === wholeSecondsMs(record)
}

/** Obeys `If-None-Match: *` on writing, the one condition the service has there besides If-Match. */
export function refuseOverwrite(headers: ReadonlyMap<string, string>, existing: ObjectRecord | undefined): void {
  const ifNoneMatch = headers.get('if-none-match')
  const ifMatch = headers.get('if-match')
  if (ifNoneMatch !== undefined && ifNoneMatch !== '*') throw new Refusal('header-not-implemented', `If-None-Match: ${ifNoneMatch}`)
  if (ifNoneMatch === '*' && existing) throw new Refusal('precondition-failed', '', { Condition: 'If-None-Match' })
  if (ifMatch === undefined) return
  if (!existing) throw new Refusal('no-such-key')
  if (!hasTag(ifMatch, existing.etag)) throw new Refusal('precondition-failed', '', { Condition: 'If-Match' })
}

function hasTag(list: string, etag: string): boolean {
  return list.split(',').map(tag => tag.trim().replace(/^W\//, '')).some(tag => tag === '*' || tag === etag || `"${tag}"` === etag)
}

/** Undefined when there is no such header or its date does not parse: it is then passed over. */
function wasModifiedAfter(record: ObjectRecord, date: string | undefined): boolean | undefined {
  const dateMs = Date.parse(date ?? '')
  return Number.isNaN(dateMs) ? undefined : wholeSecondsMs(record) > dateMs
}

/** HTTP dates have whole seconds: a finer time would always seem newer than what the client was told. */
function wholeSecondsMs(record: ObjectRecord): number {
  return Math.floor(record.lastModifiedMs / 1000) * 1000
}
