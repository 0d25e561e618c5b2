import { connect } from 'node:net'
import type { Socket } from 'node:net'

/** A client that says exactly what a test wants, right or wrong. */
export interface Talk {
  /** Sends one line and answers the whole reply, or '' when the connection was cut. */
  say(line: string): Promise<string>
  /** Sends octets as they are. */
  write(octets: Buffer | string): void
  /** The next whole reply, or '' when the connection was cut. */
  hear(): Promise<string>
  end(): void
}

export async function talkTo(smtpUrl: string): Promise<Talk> {
  const socket: Socket = connect(Number(new URL(smtpUrl).port), '127.0.0.1')
  let heard = ''
  let isCut = false
  const waiting: (() => void)[] = []
  const wake = () => waiting.splice(0).forEach(resume => resume())
  socket.setEncoding('latin1')
  socket.on('data', (text) => {
    heard += String(text)
    wake()
  })
  socket.on('error', () => {})
  socket.on('close', () => {
    isCut = true
    wake()
  })
  const hear = async (): Promise<string> => {
    for (;;) {
      const reply = /^(?:\d{3}-[^\n]*\n)*\d{3} [^\n]*\n/.exec(heard)?.[0]
      if (reply !== undefined) {
        heard = heard.slice(reply.length)
        return reply.trim()
      }
      if (isCut) return ''
      await new Promise<void>(resolve => waiting.push(resolve))
    }
  }
  return {
    hear,
    write: octets => socket.write(octets),
    say: (line) => {
      socket.write(`${line}\r\n`)
      return hear()
    },
    end: () => socket.destroy(),
  }
}

export const GOOD_HEADERS = [
  'Date: Tue, 19 May 2026 09:15:00 +0000',
  'From: Northfield Studio <letters@northfield.test>',
  'To: Joel <joel@example.test>',
  'Subject: Hello',
  'Message-ID: <one@northfield.test>',
]

/** A message in octets, without the final dot. */
export function writeMessage(headers: readonly string[] = GOOD_HEADERS, body = 'Words.\r\n'): Buffer {
  return Buffer.from(`${headers.join('\r\n')}\r\n\r\n${body}`, 'latin1')
}

/** Greets, names sender and recipient, sends the octets and answers the last reply. */
export async function deliver(smtpUrl: string, message: Buffer, options: { to?: string, mailArguments?: string } = {}): Promise<string> {
  const talk = await talkTo(smtpUrl)
  try {
    await talk.hear()
    await talk.say('EHLO client.test')
    await talk.say(`MAIL FROM:<letters@northfield.test>${options.mailArguments ?? ''}`)
    await talk.say(`RCPT TO:<${options.to ?? 'joel@example.test'}>`)
    await talk.say('DATA')
    talk.write(message)
    return await talk.say(message.toString('latin1').endsWith('\r\n') ? '.' : '\r\n.')
  }
  finally {
    talk.end()
  }
}
