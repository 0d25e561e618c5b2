import type { Letter } from '../layout'
import type { AddressAlreadyKnownData } from './address-already-known'
import { addressAlreadyKnownLetter } from './address-already-known'
import type { AnsweredData } from './answered'
import { answeredLetter } from './answered'
import type { ConfirmAddressData } from './confirm-address'
import { confirmAddressLetter } from './confirm-address'
import type { ForgottenPasswordData } from './forgotten-password'
import { forgottenPasswordLetter } from './forgotten-password'
import type { InvitationData } from './invitation'
import { invitationLetter } from './invitation'
import type { MoneyBackData } from './money-back'
import { moneyBackLetter } from './money-back'
import type { PasswordChangedData } from './password-changed'
import { passwordChangedLetter } from './password-changed'
import type { ReceiptData } from './receipt'
import { receiptLetter } from './receipt'
import type { ReviewSentData } from './review-sent'
import { reviewSentLetter } from './review-sent'
import type { ReviewWaitingData } from './review-waiting'
import { reviewWaitingLetter } from './review-waiting'

export type { Letter } from '../layout'

/** What each letter takes. The names are stored in the outbox: never rename one. */
interface DataByName {
  'confirm-address': ConfirmAddressData
  'address-already-known': AddressAlreadyKnownData
  'forgotten-password': ForgottenPasswordData
  'password-changed': PasswordChangedData
  'invitation': InvitationData
  'money-back': MoneyBackData
  'receipt': ReceiptData
  'review-sent': ReviewSentData
  'review-waiting': ReviewWaitingData
  'answered': AnsweredData
}

export type LetterName = keyof DataByName

export type LetterData<N extends LetterName> = DataByName[N]

const letters: { [N in LetterName]: (data: DataByName[N]) => Letter } = {
  'confirm-address': confirmAddressLetter,
  'address-already-known': addressAlreadyKnownLetter,
  'forgotten-password': forgottenPasswordLetter,
  'password-changed': passwordChangedLetter,
  'invitation': invitationLetter,
  'money-back': moneyBackLetter,
  'receipt': receiptLetter,
  'review-sent': reviewSentLetter,
  'review-waiting': reviewWaitingLetter,
  'answered': answeredLetter,
}

export function isLetterName(name: string): name is LetterName {
  return Object.hasOwn(letters, name)
}

export function listLetterNames(): LetterName[] {
  return Object.keys(letters).filter(isLetterName)
}

/**
 * Writes a letter. Pure: the same data gives the same letter.
 *
 * @throws {TypeError} when an address in the data is not absolute http or https
 */
export function writeLetter<N extends LetterName>(name: N, data: LetterData<N>): Letter {
  return letters[name](data)
}
