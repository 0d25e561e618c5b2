import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface AnsweredData {
  studioName: string
  readerName: string
  /** Whose review it is: the reader's own, or the junior's when a guardian gets the copy. */
  studentName: string
  coachName: string
  title: string
  /** How the answer begins, as plain text. */
  firstLines: string
  oneChange: string
  reviewUrl: string
  isGuardianCopy: boolean
}

/** To the student when the coach has sent the answer, and the same to the guardian of a junior. */
export function answeredLetter(data: AnsweredData): Letter {
  const coach = firstNameOf(data.coachName)
  const student = firstNameOf(data.studentName)
  return layOut({
    subject: `${coach} has answered`,
    preheader: data.title,
    heading: `${coach} has answered`,
    blocks: [
      {
        kind: 'paragraph',
        text: data.isGuardianCopy
          ? `${firstNameOf(data.readerName)}, ${data.coachName} has answered the review of ${data.studentName}. It begins like this.`
          : `${firstNameOf(data.readerName)}, the answer to your review is there. It begins like this.`,
      },
      { kind: 'words', title: data.title, text: data.firstLines },
      { kind: 'marked', label: 'One change:', text: data.oneChange },
      { kind: 'button', label: 'Read the whole answer', url: data.reviewUrl },
    ],
    studioName: data.studioName,
    why: data.isGuardianCopy
      ? `You get this letter because you are the guardian of ${student}: everything sent to ${student} comes to you too.`
      : 'You get this letter because you asked for this review.',
  })
}
