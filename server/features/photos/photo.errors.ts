import { PHOTO_MAX_COUNT } from '#shared/domain/review/photo-kinds'
import { Refusal } from '#server/refusal'

export function tooManyPhotos(): Refusal {
  return new Refusal('wrong-moment', 'too-many-photos', `A review holds ${PHOTO_MAX_COUNT} photographs. Remove one first.`)
}

export function photoNotStored(): Refusal {
  return new Refusal('unavailable', 'store-unavailable', 'The photograph could not be stored just now. Try again in a moment.', undefined, 30)
}

export function reviewSent(): Refusal {
  return new Refusal('wrong-moment', 'wrong-moment', 'This review was sent already; its photographs stay as they are.')
}
