import { letterProblems } from '#shared/domain/review/letter'
import { letterDraftSchema } from '#shared/schemas/letters'
import type { DraftView, LetterDraft, ReviewView } from '#shared/types/reviews'
import type { SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import { queueLetter } from '#server/features/mail/outbox.service'
import { recipientsOf } from '#server/features/mail/recipients'
import { earnReview } from '#server/features/money/earn'
import { stopAnswerClock } from '#server/features/turnaround/turnaround.service'
import { newId } from '#server/ids'
import { invalidFields } from '#server/refusal'
import { write } from '#server/write'
import { checkInHand } from './desk.service'
import type { DraftRow } from './letter.repository'
import { countLetters, findDraft, insertLetter, saveDraftOver } from './letter.repository'
import { draftChangedElsewhere, wrongMoment } from './review.errors'
import type { ReviewRecord } from './review.repository'
import { updateReview } from './review.repository'
import { getReviewRecord } from './review.service'
import { viewReview } from './review.view'

/** The coach's letter in progress; version 0 and the student's own title when nothing was written yet. */
export async function readDraft(ctx: SignedInCtx, { id }: { id: string }): Promise<DraftView> {
  const record = await getReviewRecord(ctx.db, ctx, id)
  checkInHand(record, ctx)
  return viewDraft(await findDraft(ctx.db, id, ctx.viewer.id), record)
}

/** @throws Refusal `draft-changed-elsewhere` when `version` is no longer the newest; nothing is overwritten. */
export async function saveDraft(ctx: SignedInCtx, input: { id: string, version: number, letter: LetterDraft }): Promise<DraftView> {
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, input.id)
    checkInHand(record, ctx)
    const isSaved = await saveDraftOver(db, {
      reviewId: input.id, coachId: ctx.viewer.id, version: input.version, letter: JSON.stringify(input.letter), nowMs: ctx.nowMs,
    })
    if (!isSaved) throw draftChangedElsewhere()
    return viewDraft(await findDraft(db, input.id, ctx.viewer.id), record)
  })
}

/**
 * Sends the draft of `version` as the answer: letter, stopped clock and the readers' mails in one transaction.
 * @throws Refusal `invalid-fields` naming what is missing, `draft-changed-elsewhere` when the draft is no longer that version.
 */
export async function sendAnswer(ctx: SignedInCtx, input: { id: string, version: number }): Promise<ReviewView> {
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, input.id)
    if (record.state === 'answered') throw wrongMoment('This review was answered already.')
    checkInHand(record, ctx)
    const draft = await findDraft(db, input.id, ctx.viewer.id)
    if (draft?.version !== input.version) throw draftChangedElsewhere()
    const letter = readLetter(draft)
    const problems = letterProblems(letter)
    if (problems.length > 0) throw invalidFields(Object.fromEntries(problems.map(problem => [problem.field, problem.message])))

    const diagnosisId = newId(ctx.nowMs)
    await insertLetter(db, {
      id: diagnosisId,
      review_id: input.id,
      sequence: await countLetters(db, input.id) + 1,
      coach_id: ctx.viewer.id,
      title: letter.title.trim() || record.title,
      leave_alone: letter.leaveAlone,
      saw: letter.saw,
      why: letter.why,
      how_sure: letter.howSure,
      one_change: letter.oneChange.trim(),
      caution: letter.caution,
      answered_at_ms: ctx.nowMs,
    }, {
      id: newId(ctx.nowMs),
      diagnosis_id: diagnosisId,
      drill_title: letter.drillTitle.trim(),
      drill_steps: letter.drillSteps,
      drill_dose: letter.drillDose.trim(),
    })
    await updateReview(db, input.id, 'in_hand', { state: 'answered', answered_at_ms: ctx.nowMs })
    await stopAnswerClock(db, ctx, input.id)
    await earnReview(db, ctx, { reviewId: input.id, coachId: ctx.viewer.id })
    for (const { userId } of await recipientsOf(db, record.student_id)) {
      await queueLetter(db, ctx, { letter: 'answered', event: diagnosisId, subjectId: diagnosisId, to: { userId } })
    }
    await recordDeed(db, ctx, 'review-answered', input.id)
    return viewReview(db, ctx, await getReviewRecord(db, ctx, input.id))
  })
}

function readLetter(draft: DraftRow): LetterDraft {
  return letterDraftSchema.parse(JSON.parse(draft.letter))
}

function viewDraft(draft: DraftRow | undefined, record: ReviewRecord): DraftView {
  if (draft) return { version: draft.version, letter: readLetter(draft), savedAtMs: draft.saved_at_ms }
  return {
    version: 0,
    savedAtMs: null,
    letter: {
      title: record.title, leaveAlone: '', saw: '', why: '', howSure: 'fairly_sure', oneChange: '',
      drillTitle: '', drillSteps: '', drillDose: '', caution: '',
    },
  }
}
