import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface ReviewSentData {
  studioName: string
  readerName: string
  /** Whose review it is: the reader's own, or the junior's when a guardian gets the copy. */
  studentName: string
  /** The coach the student chose; left out when the first free coach answers. */
  coachName?: string | undefined
  questionTitle: string
  /** Like "Thu 21 May, 17:00", in the reader's zone. */
  promiseText: string
  reviewUrl: string
  isGuardianCopy: boolean
}

/** To the student when the review is paid for and waits, and the same to the guardian of a junior. */
export function reviewSentLetter(data: ReviewSentData): Letter {
  const student = firstNameOf(data.studentName)
  const coach = data.coachName ?? 'the first coach who is free'
  return layOut({
    subject: `Your answer comes by ${data.promiseText}`,
    preheader: data.questionTitle,
    heading: `Answered by ${data.promiseText}`,
    blocks: [
      {
        kind: 'paragraph',
        text: data.isGuardianCopy
          ? `${firstNameOf(data.readerName)}, ${data.studentName} has sent a question and film to ${coach}. You get a letter when the answer is there.`
          : `${firstNameOf(data.readerName)}, your question and your film are with ${coach}. You get a letter when the answer is there.`,
      },
      { kind: 'facts', rows: [{ name: 'Question', value: data.questionTitle }] },
      { kind: 'button', label: 'See the review', url: data.reviewUrl },
    ],
    studioName: data.studioName,
    why: data.isGuardianCopy
      ? `You get this letter because you are the guardian of ${student}: everything sent to ${student} comes to you too.`
      : 'You get this letter because you asked for this review.',
  })
}
