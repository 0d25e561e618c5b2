import { Refusal, invalidFields } from '#server/refusal'

/** One answer for an unknown address, a wrong password and a suspended account: it must not tell them apart. */
export function wrongEmailOrPassword(): Refusal {
  return new Refusal('not-signed-in', 'wrong-email-or-password', 'The address or the password is not right.')
}

/** Only told to someone who knew the password. */
export function emailNotConfirmed(): Refusal {
  return new Refusal('not-allowed', 'email-not-confirmed', 'Confirm your address first. We have just sent you a new mail with the link.')
}

export function linkUsedOrExpired(): Refusal {
  return new Refusal('gone', 'link-used-or-expired', 'This link has been used or has expired.')
}

export function alreadyHasAccount(): Refusal {
  return new Refusal('wrong-moment', 'already-has-account', 'This address has an account already.')
}

export function guardianFirst(adultAge: number): Refusal {
  return invalidFields({ birthDate: `Under ${adultAge}, a guardian opens the account first. Ask yours to sign up and add you.` })
}

export function studioNotSetUp(): Refusal {
  return new Refusal('unavailable', 'not-set-up', 'This studio is not open yet.')
}
