import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface ConfirmAddressData {
  studioName: string
  name: string
  confirmUrl: string
  validUntilText: string
}

/** To someone who has just signed up: proves that the address is theirs. */
export function confirmAddressLetter(data: ConfirmAddressData): Letter {
  return layOut({
    subject: 'Confirm your address',
    preheader: `The link works until ${data.validUntilText}.`,
    heading: 'Confirm your address',
    blocks: [
      { kind: 'paragraph', text: `${firstNameOf(data.name)}, please confirm that this address is yours. Answers to your reviews will come here.` },
      { kind: 'button', label: 'Confirm this address', url: data.confirmUrl },
      { kind: 'paragraph', text: `The link works once, until ${data.validUntilText}. If you did not sign up, you need not do anything.` },
    ],
    studioName: data.studioName,
    why: 'You get this letter because someone signed up with this address.',
  })
}
