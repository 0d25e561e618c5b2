import { Refusal } from '#server/refusal'

export function wrongMoment(message: string): Refusal {
  return new Refusal('wrong-moment', 'wrong-moment', message)
}

export function noCreditLeft(): Refusal {
  return new Refusal('wrong-moment', 'no-credit-left', 'You have no review left. Your studio can add one; what you wrote is kept.')
}

export function noClipYet(): Refusal {
  return new Refusal('wrong-moment', 'no-clip-yet', 'Add a clip first, from in front or from behind along the target line. One is enough to go on.')
}

export function clipNotReady(): Refusal {
  return new Refusal('wrong-moment', 'clip-not-ready', 'A clip is still being sent or read. Wait until it is done, or remove it.')
}

export function alreadyInHand(coachName: string): Refusal {
  return new Refusal('wrong-moment', 'already-in-hand', `${coachName} has taken this review up.`)
}

export function draftChangedElsewhere(): Refusal {
  return new Refusal('wrong-moment', 'draft-changed-elsewhere', 'This letter was changed in another window. Nothing was overwritten; read the other version and choose.')
}

export function unknownCoach(): Refusal {
  return new Refusal('invalid', 'invalid-fields', 'Some of this needs another look.', { chosenCoachId: 'This coach takes no reviews. Choose another.' })
}
