import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { inTransaction } from '#server/database/transaction'
import { newId } from '#server/ids'
import { composeLetter } from './compose'
import type { LetterName } from './letters'
import type { OutboxRow } from './outbox.repository'
import { claimDueLetters, insertLetter, markForLater, markGivenUp, markSent } from './outbox.repository'

const MINUTE_MS = 60_000
/** Waits after each refusal for now; after the last the letter is given up, two and a half days on. */
const BACK_OFF_MS = [1, 5, 15, 60, 240, 720, 1440, 1440].map(minutes => minutes * MINUTE_MS)
/** Twice as long as one letter can take at a mail server that hangs. */
const LEASE_MS = 2 * MINUTE_MS
/** Sent side by side, so that the lease covers them all. */
const BATCH = 5

export interface QueuedLetter {
  letter: LetterName
  /** What happened and to what; with the reader it names the letter, so that telling an event twice sends one letter. */
  event: string
  /** The row that the letter speaks of. */
  subjectId: string
  /** The reader: a person with an account, or a bare address for invitations. */
  to: { userId: string } | { address: string }
  /** The plain secret of the link inside, kept until the letter is sent. */
  secret?: string
  /** A link that has run out is not worth sending. */
  expiresAtMs?: number
}

/** Queues a letter in the transaction of the change that it tells of, and has it sent right after the commit. */
export async function queueLetter(db: Database, ctx: Ctx, letter: QueuedLetter): Promise<void> {
  const id = newId(ctx.nowMs)
  const reader = 'userId' in letter.to ? letter.to.userId : letter.to.address
  await insertLetter(db, {
    id,
    event_key: `${letter.letter} ${letter.event} ${reader}`,
    letter: letter.letter,
    subject_id: letter.subjectId,
    user_id: 'userId' in letter.to ? letter.to.userId : null,
    address: 'address' in letter.to ? letter.to.address : null,
    secret: letter.secret ?? null,
    message_id: `<${id}@${new URL(ctx.settings.appUrl).hostname}>`,
    state: 'waiting',
    due_at_ms: ctx.nowMs,
    created_at_ms: ctx.nowMs,
    expires_at_ms: letter.expiresAtMs ?? null,
    sent_at_ms: null,
  })
  ctx.pokesAfterWrite.add('mail:send')
}

/** What came of a letter, to be written down with that of the others. */
type Outcome = (db: Database) => Promise<void>

/** Sends what is due, oldest first. A letter whose sending is cut short is sent again later with the same Message-ID. */
export async function sendDueLetters(ctx: Ctx): Promise<void> {
  for (;;) {
    const due = await claimDueLetters(ctx.db, ctx.nowMs, BATCH, LEASE_MS)
    const outcomes = await Promise.all(due.map(row => sendOne(ctx, row).catch(error => setAside(ctx, row, error))))
    // One commit for the batch: letters must not keep answers waiting for the disk.
    if (outcomes.length > 0) {
      await inTransaction(ctx.db, async (db) => {
        for (const outcome of outcomes) await outcome(db)
      })
    }
    if (due.length < BATCH) return
  }
}

async function sendOne(ctx: Ctx, row: OutboxRow): Promise<Outcome> {
  const attempts = row.attempts + 1
  if (row.expires_at_ms !== null && row.expires_at_ms <= ctx.nowMs) return db => markGivenUp(db, row.id, row.attempts, 'The link in it ran out.')
  const composed = await composeLetter(ctx, row)
  if (!composed) return db => markGivenUp(db, row.id, row.attempts, 'What it speaks of is gone.')
  const result = await ctx.mail.send({ ...composed, messageId: row.message_id, date: new Date(row.created_at_ms) })
  if (result.kind === 'sent') return db => markSent(db, row.id, ctx.nowMs)
  ctx.log.warn({ outboxId: row.id, letter: row.letter, attempts, reason: result.reason }, 'letter not taken')
  const waitMs = BACK_OFF_MS[attempts - 1]
  if (result.kind === 'refused-for-good' || waitMs === undefined) return db => markGivenUp(db, row.id, attempts, result.reason)
  return db => markForLater(db, row.id, attempts, ctx.nowMs + waitMs, result.reason)
}

/** A letter that cannot be written, through a fault of ours, must not keep the others back. */
function setAside(ctx: Ctx, row: OutboxRow, error: unknown): Outcome {
  ctx.log.error({ outboxId: row.id, letter: row.letter, err: error }, 'letter not written')
  return db => markForLater(db, row.id, row.attempts, ctx.nowMs + 15 * MINUTE_MS, 'It could not be written.')
}
