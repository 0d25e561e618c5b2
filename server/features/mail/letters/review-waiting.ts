import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface ReviewWaitingData {
  studioName: string
  studentName: string
  /** The coach the student chose; left out when the first free coach answers. */
  coachName?: string | undefined
  questionTitle: string
  /** Like "Thu 21 May, 17:00", in the reader's zone. */
  promiseText: string
  reviewUrl: string
}

/** To a coach when a paid review enters the queue. The student's name stays out of the subject, which lock screens show. */
export function reviewWaitingLetter(data: ReviewWaitingData): Letter {
  return layOut({
    subject: `A review waits, promised by ${data.promiseText}`,
    preheader: data.coachName ? `${data.studentName} chose you.` : 'The first free coach answers it.',
    heading: `A review waits, promised by ${data.promiseText}`,
    blocks: [
      {
        kind: 'paragraph',
        text: data.coachName
          ? `${firstNameOf(data.coachName)}, ${data.studentName} has sent film and chose you to answer.`
          : `${data.studentName} has sent film. The first free coach answers it, so it is yours once you take it up.`,
      },
      {
        kind: 'facts',
        rows: [
          { name: 'Question', value: data.questionTitle },
          { name: 'Student', value: data.studentName },
          { name: 'Coach', value: data.coachName ?? 'First free' },
          { name: 'Promised by', value: data.promiseText },
        ],
      },
      { kind: 'button', label: 'Open the review', url: data.reviewUrl },
    ],
    studioName: data.studioName,
    why: 'You get this letter because you answer reviews for this studio.',
  })
}
