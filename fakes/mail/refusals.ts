/** What a careful receiving server refuses, in one table: the stand-in refuses the same, so that a letter that leaves here leaves anywhere. */

export interface MailRefusal {
  /** The moment of the conversation at which the answer is given. */
  at: 'order' | 'mail' | 'rcpt' | 'data'
  code: number
  words: string
}

export const MAIL_REFUSALS = {
  'mail-before-hello': { at: 'order', code: 503, words: 'say HELO or EHLO first' },
  'data-before-recipient': { at: 'order', code: 503, words: 'name a recipient before DATA' },
  'sender-not-an-address': { at: 'mail', code: 501, words: 'the sender is not an address this server can answer' },
  'smtputf8-not-offered': { at: 'mail', code: 555, words: 'SMTPUTF8 was not offered' },
  'declared-too-large': { at: 'mail', code: 552, words: 'the size announced is over 25 MB' },
  'recipient-not-an-address': { at: 'rcpt', code: 501, words: 'the recipient is not an address' },
  'too-many-recipients': { at: 'rcpt', code: 452, words: 'over 100 recipients in one message' },
  'too-large': { at: 'data', code: 552, words: 'the message is over 25 MB' },
  'nul-octet': { at: 'data', code: 554, words: 'the message holds a NUL octet (RFC 5321 4.5.2)' },
  'bare-line-feed': { at: 'data', code: 554, words: 'a line feed without carriage return (RFC 5321 2.3.8)' },
  'bare-carriage-return': { at: 'data', code: 554, words: 'a carriage return without line feed (RFC 5321 2.3.8)' },
  'line-too-long': { at: 'data', code: 554, words: 'a line over 998 octets (RFC 5322 2.1.1)' },
  'header-malformed': { at: 'data', code: 550, words: 'a header line that is no header (RFC 5322 2.2)' },
  'header-not-ascii': { at: 'data', code: 550, words: 'a header with octets outside ASCII that are not encoded (RFC 2047)' },
  'header-twice': { at: 'data', code: 550, words: 'a header that may stand once stands twice (RFC 5322 3.6)' },
  'date-missing': { at: 'data', code: 550, words: 'no Date header (RFC 5322 3.6)' },
  'date-unreadable': { at: 'data', code: 550, words: 'the Date header is no date (RFC 5322 3.3)' },
  'from-missing': { at: 'data', code: 550, words: 'no From header (RFC 5322 3.6)' },
  'from-not-an-address': { at: 'data', code: 550, words: 'the From header holds no address (RFC 5322 3.4)' },
  'message-id-missing': { at: 'data', code: 550, words: 'no Message-ID header (RFC 5322 3.6.4)' },
  'message-id-malformed': { at: 'data', code: 550, words: 'the Message-ID is not of the form <left@right> (RFC 5322 3.6.4)' },
  'body-eight-bit-undeclared': { at: 'data', code: 554, words: 'octets over 127 in a message not sent with BODY=8BITMIME (RFC 6152)' },
} as const satisfies Record<string, MailRefusal>

export type MailRefusalName = keyof typeof MAIL_REFUSALS

/** Carries a refusal to the SMTP library, which answers with `responseCode` and the message. */
export class SmtpRefusal extends Error {
  readonly responseCode: number

  constructor(code: number, words: string, readonly refusalName: string) {
    super(words)
    this.name = 'SmtpRefusal'
    this.responseCode = code
  }
}

/** @param detail what was found, shortened, for whoever reads the answer */
export function refuse(name: MailRefusalName, detail?: string): SmtpRefusal {
  const { code, words } = MAIL_REFUSALS[name]
  return new SmtpRefusal(code, detail ? `${words}: ${detail.slice(0, 120)}` : words, name)
}
