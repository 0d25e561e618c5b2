import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface PasswordChangedData {
  studioName: string
  name: string
  whenText: string
  forgotUrl: string
}

/** To the holder of an account whose password has just been changed, so that a stranger's change does not go unseen. */
export function passwordChangedLetter(data: PasswordChangedData): Letter {
  return layOut({
    subject: 'Your password was changed',
    preheader: `It was changed on ${data.whenText}.`,
    heading: 'Your password was changed',
    blocks: [
      { kind: 'paragraph', text: `${firstNameOf(data.name)}, the password of your account was changed on ${data.whenText}.` },
      { kind: 'paragraph', text: 'If it was you, you need not do anything.' },
      { kind: 'link', before: 'If it was not you,', label: 'choose a new password now', url: data.forgotUrl },
    ],
    studioName: data.studioName,
    why: 'You get this letter because the password of your account was changed.',
  })
}
