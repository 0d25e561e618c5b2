import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface AddressAlreadyKnownData {
  studioName: string
  name: string
  signInUrl: string
  forgotUrl: string
}

/** To the holder of an account whose address someone signed up with again; the sign-up page tells that person nothing. */
export function addressAlreadyKnownLetter(data: AddressAlreadyKnownData): Letter {
  return layOut({
    subject: 'You already have an account',
    preheader: 'Someone tried to sign up with your address. Nothing was changed.',
    heading: 'You already have an account',
    blocks: [
      { kind: 'paragraph', text: `${firstNameOf(data.name)}, someone tried to sign up with this address. It has an account already, so no second one was made and nothing was changed.` },
      { kind: 'paragraph', text: 'If it was you, sign in.' },
      { kind: 'button', label: 'Sign in', url: data.signInUrl },
      { kind: 'link', before: 'If you do not know your password,', label: 'choose a new one', url: data.forgotUrl },
      { kind: 'paragraph', text: 'If it was not you, you need not do anything.' },
    ],
    studioName: data.studioName,
    why: 'You get this letter because someone signed up with your address.',
  })
}
