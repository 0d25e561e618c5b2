import { firstLines } from '#shared/domain/review/first-lines'
import { toLetter } from '#server/features/reviews/letter.repository'
import { writeLetter } from '../letters'
import { recipientsOf } from '../recipients'
import type { Composer } from './material'
import { pageUrl } from './material'
import { formatMoment } from '#shared/utils/times'
import { findAnswerSubject, findWaitingSubject } from './review-subject.repository'

/** Enough to know whether to read it now, little enough to read on a lock screen. */
const FIRST_LINES_CHARS = 280

export const reviewWaiting: Composer = async ({ ctx, row, studio, reader, timeZone }) => {
  const review = await findWaitingSubject(ctx.db, row.subject_id)
  if (!review || !reader) return undefined
  const isForReader = review.state === 'waiting' || (review.state === 'in_hand' && review.coach_id === reader.id)
  return isForReader
    ? writeLetter('review-waiting', {
        studioName: studio.name,
        studentName: review.student_name,
        coachName: review.chosen_coach_name ?? undefined,
        questionTitle: review.title,
        promiseText: formatMoment(review.promised_at_ms, timeZone),
        reviewUrl: pageUrl(ctx, `/desk/${review.id}`),
      })
    : undefined
}

/** Worth sending while the answer is still to come; after that the letter with the answer says more. */
export const reviewSent: Composer = async ({ ctx, row, studio, reader, timeZone }) => {
  const review = await findWaitingSubject(ctx.db, row.subject_id)
  if (!review || !reader || review.state === 'withdrawn') return undefined
  const recipient = (await recipientsOf(ctx.db, review.student_id)).find(({ userId }) => userId === reader.id)
  return recipient && writeLetter('review-sent', {
    studioName: studio.name,
    readerName: reader.name,
    studentName: review.student_name,
    coachName: review.chosen_coach_name ?? undefined,
    questionTitle: review.title,
    promiseText: formatMoment(review.promised_at_ms, timeZone),
    reviewUrl: pageUrl(ctx, `/reviews/${review.id}`),
    isGuardianCopy: recipient.isGuardian,
  })
}

export const answered: Composer = async ({ ctx, row, studio, reader }) => {
  const answer = await findAnswerSubject(ctx.db, row.subject_id)
  if (!answer || !reader) return undefined
  // Asked again now: a guardianship may have ended while the letter waited.
  const recipient = (await recipientsOf(ctx.db, answer.student_id)).find(({ userId }) => userId === reader.id)
  return recipient && writeLetter('answered', {
    studioName: studio.name,
    readerName: reader.name,
    studentName: answer.student_name,
    coachName: answer.coach_name,
    title: answer.title,
    firstLines: firstLines(toLetter(answer), FIRST_LINES_CHARS),
    oneChange: answer.one_change,
    reviewUrl: pageUrl(ctx, `/reviews/${answer.review_id}`),
    isGuardianCopy: recipient.isGuardian,
  })
}
