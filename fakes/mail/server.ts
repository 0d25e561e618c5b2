import { createFaultBook } from './faults'
import { listenInbox } from './inbox-http'
import { createMessageStore } from './messages'
import { listenSmtp } from './smtp'

export interface MailStandInOptions {
  /** 0 for any free one. */
  smtpPort: number
  /** 0 for any free one. */
  inboxPort: number
  /** Where letters are kept, one a line, to be read again on the next start; in memory only without it. */
  statePath?: string
  /** Stamps `receivedAtMs`. */
  now?: () => number
}

export interface MailStandIn {
  /** `smtp://127.0.0.1:port` */
  smtpUrl: string
  /** `http://127.0.0.1:port` */
  inboxUrl: string
  close(): Promise<void>
}

interface RefusedEntry {
  atMs: number
  name: string
  code: number
  words: string
}

const MAX_REFUSED_ENTRIES = 100

/**
 * Starts the SMTP stand-in and its inbox on 127.0.0.1.
 *
 * @throws when a port is taken or the state file cannot be read
 */
export async function startMail(options: MailStandInOptions): Promise<MailStandIn> {
  const now = options.now ?? Date.now
  const messages = createMessageStore(options.statePath)
  const faults = createFaultBook()
  const refused: RefusedEntry[] = []
  const smtp = await listenSmtp(options.smtpPort, {
    messages,
    faults,
    now,
    onRefused: (entry) => {
      refused.push({ atMs: now(), ...entry })
      if (refused.length > MAX_REFUSED_ENTRIES) refused.shift()
    },
  })
  const smtpUrl = `smtp://127.0.0.1:${smtp.port}`
  try {
    const inbox = await listenInbox(options.inboxPort, {
      messages,
      faults,
      describe: () => ({ smtpUrl, refused }),
      reset: () => {
        messages.clear()
        faults.clear()
        refused.length = 0
      },
    })
    const address = inbox.address()
    if (address === null || typeof address === 'string') throw new Error('the inbox has no port')
    return {
      smtpUrl,
      inboxUrl: `http://127.0.0.1:${address.port}`,
      close: async () => {
        const isClosed = new Promise<void>(resolve => inbox.close(() => resolve()))
        inbox.closeAllConnections()
        await Promise.all([isClosed, smtp.close()])
      },
    }
  }
  catch (cause) {
    await smtp.close()
    throw cause
  }
}
