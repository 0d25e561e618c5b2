import { Refusal } from '#server/refusal'

export function consentNeeded(): Refusal {
  return new Refusal('not-allowed', 'consent-needed', 'A guardian must agree before film of a junior is sent or shown. Nothing was sent.')
}

export function tooManyClips(): Refusal {
  return new Refusal('wrong-moment', 'too-many-clips', 'This review holds as many clips as it can. Remove one first.')
}

export function partsMissing(missingBytes: number): Refusal {
  return new Refusal('wrong-moment', 'parts-missing', `The clip is not whole yet: ${missingBytes} bytes are missing. Send the missing parts, then try again.`)
}

export function uploadGone(): Refusal {
  return new Refusal('gone', 'upload-gone', 'What was sent of this clip is no longer there. Remove the clip and send it again.')
}

export function storeUnavailable(): Refusal {
  return new Refusal('unavailable', 'store-unavailable', 'The film store does not answer at the moment. What was sent is kept; try again in a minute.', undefined, 60)
}

export function clipDone(): Refusal {
  return new Refusal('wrong-moment', 'clip-done', 'This clip has arrived whole; it takes no more parts.')
}

export function clipNotRead(): Refusal {
  return new Refusal('wrong-moment', 'clip-not-ready', 'This clip has not been read and accepted, so nothing is known of its swings yet.')
}

export function alreadySent(): Refusal {
  return new Refusal('wrong-moment', 'wrong-moment', 'This review was sent already; its film stays as it is.')
}
