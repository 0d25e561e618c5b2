import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface ForgottenPasswordData {
  studioName: string
  name: string
  resetUrl: string
  validUntilText: string
}

/** To someone who asked for a new password, or whose address was typed by another. */
export function forgottenPasswordLetter(data: ForgottenPasswordData): Letter {
  return layOut({
    subject: 'Choose a new password',
    preheader: `The link works until ${data.validUntilText}.`,
    heading: 'Choose a new password',
    blocks: [
      { kind: 'paragraph', text: `${firstNameOf(data.name)}, someone asked for a new password for your account. If it was you, choose one here.` },
      { kind: 'button', label: 'Choose a new password', url: data.resetUrl },
      { kind: 'paragraph', text: `The link works once, until ${data.validUntilText}.` },
      { kind: 'paragraph', text: 'If it was not you, you need not do anything. Your password stays as it is.' },
    ],
    studioName: data.studioName,
    why: 'You get this letter because a new password was asked for with your address.',
  })
}
