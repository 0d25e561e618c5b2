/** `jiti fakes/mail/main.ts`: the stand-in as a process of its own, with the app's own SMTP_URL. */
import { startMail } from './server'

function readPort(text: string | undefined, name: string): number {
  const port = Number(text)
  if (text === undefined || text === '' || !Number.isInteger(port) || port < 0 || port > 65_535) {
    throw new Error(`${name} must name a port from 0 to 65535`)
  }
  return port
}

function readSmtpPort(smtpUrl: string | undefined): number {
  if (!smtpUrl || !URL.canParse(smtpUrl)) throw new Error('SMTP_URL must be set, like smtp://127.0.0.1:3125')
  const url = new URL(smtpUrl)
  if (url.protocol !== 'smtp:' || !['127.0.0.1', 'localhost'].includes(url.hostname)) {
    throw new Error('the mail stand-in listens on 127.0.0.1 only: SMTP_URL must be smtp://127.0.0.1:port')
  }
  return readPort(url.port, 'SMTP_URL')
}

async function run(): Promise<void> {
  const { SMTP_URL, FAKE_MAIL_INBOX_PORT, FAKE_MAIL_STATE } = process.env
  const mail = await startMail({
    smtpPort: readSmtpPort(SMTP_URL),
    inboxPort: readPort(FAKE_MAIL_INBOX_PORT, 'FAKE_MAIL_INBOX_PORT'),
    ...(FAKE_MAIL_STATE ? { statePath: FAKE_MAIL_STATE } : {}),
  })
  process.stdout.write(`mail stand-in: ${mail.smtpUrl}, inbox ${mail.inboxUrl}\n`)
  const stop = () => {
    mail.close().then(() => process.exit(0), () => process.exit(1))
  }
  process.once('SIGTERM', stop)
  process.once('SIGINT', stop)
}

run().catch((cause: unknown) => {
  process.stderr.write(`mail stand-in: ${cause instanceof Error ? cause.message : String(cause)}\n`)
  process.exit(1)
})
