import { z } from 'zod'
import { HOW_SURE, LETTER_MAX_LENGTHS } from '#shared/domain/review/letter'
import { text } from './common'
import { TITLE_MAX_LENGTH } from './reviews'

/** A letter in progress, every part of which may be empty; `letterProblems` says what keeps it from being sent. */
export const letterDraftSchema = z.object({
  title: text(TITLE_MAX_LENGTH),
  leaveAlone: text(LETTER_MAX_LENGTHS.leaveAlone),
  saw: text(LETTER_MAX_LENGTHS.saw),
  why: text(LETTER_MAX_LENGTHS.why),
  howSure: z.enum(HOW_SURE),
  oneChange: text(LETTER_MAX_LENGTHS.oneChange),
  drillTitle: text(LETTER_MAX_LENGTHS.drillTitle),
  drillSteps: text(LETTER_MAX_LENGTHS.drillSteps),
  drillDose: text(LETTER_MAX_LENGTHS.drillDose),
  caution: text(LETTER_MAX_LENGTHS.caution),
})

/** `PUT /api/reviews/:id/draft`: `version` is the one that was read; 0 when there was none. */
export const saveDraftSchema = z.object({
  version: z.number().int().min(0),
  letter: letterDraftSchema,
})

/** `POST /api/reviews/:id/answer`: the version of the draft to send. */
export const answerSchema = z.object({ version: z.number().int().min(1) })
