import type { ChangeReview } from '#shared/schemas/reviews'
import type { ReviewView, SubmitAnswer } from '#shared/types/reviews'
import type { FieldErrors } from '#shared/types/answers'
import { findQuestion, keepQuestion, type KeptQuestion } from '~/utils/kept-question'
import { rememberChoice, type PayMeans } from '~/utils/pay-means'

/** What a student fills in, all of it text but the coach. */
export interface ReviewFields {
  title: string
  question: string
  area: string
  club: string
  misses: string
  tried: string
  /** Empty for the first coach who is free. */
  chosenCoachId: string
}

const EMPTY_FIELDS: ReviewFields = {
  title: '', question: '', area: 'full_swing', club: '7-iron', misses: '', tried: '', chosenCoachId: '',
}

interface Asker {
  /** Chosen by the link that was followed. */
  coachId?: string
  /** Nobody is signed in: the question lies in this browser until there is an account. */
  isVisitor: boolean
}

/** A review being asked: it is made on the server at the first change and follows what is typed. */
export function useNewReview(draft: ReviewView | undefined, { coachId = '', isVisitor }: Asker) {
  const router = useRouter()
  const reviewId = ref(draft?.id)
  const fields = reactive<ReviewFields>(draft === undefined ? { ...EMPTY_FIELDS, chosenCoachId: coachId } : readFields(draft))
  const handedness = ref<KeptQuestion['handedness']>(draft?.handedness ?? 'right')
  const isKeptHere = ref(false)
  let saved: ReviewFields = { ...fields }
  // Sent again as it was when the first answer got lost, so that one question does not become two drafts.
  let creation: { key: string, body: ReviewFields } | undefined
  const autosave = useAutosave(save)
  const submitting = useDeed()

  /** After a change. A visitor's is kept at once: there is no server to wait for. */
  function touch() {
    if (isVisitor) isKeptHere.value = keepQuestion({ fields: { ...fields }, handedness: handedness.value })
    else autosave.touch()
  }

  /** Fills in what was asked here before; what was typed meanwhile stays. True when there was something. */
  function recall(): boolean {
    const kept = draft === undefined ? findQuestion() : undefined
    if (kept === undefined) return false
    handedness.value = kept.handedness
    for (const name of FIELD_NAMES) {
      if (fields[name] === EMPTY_FIELDS[name]) fields[name] = kept.fields[name] ?? fields[name]
    }
    isKeptHere.value = true
    return true
  }

  async function save() {
    if (isVisitor) return
    if (reviewId.value === undefined) await create()
    const sent = { ...fields }
    const change = changeBetween(saved, sent)
    if (Object.keys(change).length === 0) return
    await $fetch(`/api/reviews/${reviewId.value}`, { method: 'PATCH', body: change })
    saved = sent
  }

  async function create() {
    creation ??= { key: crypto.randomUUID(), body: { ...fields } }
    const { body, key } = creation
    const review = await $fetch<ReviewView>('/api/reviews', {
      method: 'POST',
      headers: { 'Idempotency-Key': key },
      body: { ...body, chosenCoachId: body.chosenCoachId || null },
    })
    reviewId.value = review.id
    saved = { ...body }
    // A reload must find the draft again.
    await router.replace({ query: { ...router.currentRoute.value.query, draft: review.id } })
  }

  /** The draft's id, made now when there is none; undefined when it could not be made. */
  async function ensureDraft(): Promise<string | undefined> {
    if (isVisitor) return undefined
    if (reviewId.value === undefined) autosave.touch()
    await autosave.flush()
    return reviewId.value
  }

  /** What a coach still needs, by field; empty when all is there. The rules come only now, so that the page starts light. */
  async function findMissing(): Promise<FieldErrors> {
    // Without a connection the rules cannot be had; the server knows them too and checks when the review is sent.
    const rules = await import('#shared/schemas/reviews').catch(() => undefined)
    const result = rules?.completeReviewSchema.safeParse(fields)
    return Object.fromEntries(result?.error?.issues.map(issue => [issue.path.join('.'), issue.message]) ?? [])
  }

  /** Sent by credit, or kept for the card page whose address comes along; undefined when neither (see `submitting.problem`). */
  async function submit(means: PayMeans): Promise<SubmitAnswer | undefined> {
    if (!await autosave.flush() || reviewId.value === undefined) return undefined
    const answer = await submitting.run(headers => $fetch<SubmitAnswer>(`/api/reviews/${reviewId.value}/submit`, {
      method: 'POST', headers, body: means,
    }), JSON.stringify(means))
    if (answer === undefined) return undefined
    if (answer.checkoutUrl !== null && means.payBy === 'card') rememberChoice(answer.review.id, means)
    // The page of the review must not show it as the draft it was here.
    clearNuxtData(`review-${answer.review.id}`)
    return answer
  }

  return {
    reviewId, fields, handedness, isVisitor, isKeptHere, touch, recall, ensureDraft, findMissing, submit, submitting,
    saveState: autosave.state, saveProblem: autosave.problem,
  }
}

function readFields(draft: ReviewView): ReviewFields {
  const { title, question, area, club, misses, tried } = draft
  return { title, question, area, club, misses, tried, chosenCoachId: draft.chosenCoach?.id ?? '' }
}

function changeBetween(before: ReviewFields, after: ReviewFields): Partial<Record<keyof ChangeReview, string | null>> {
  const change: Partial<Record<keyof ReviewFields, string | null>> = {}
  for (const name of FIELD_NAMES) {
    if (before[name] !== after[name]) change[name] = after[name]
  }
  if (change.chosenCoachId === '') change.chosenCoachId = null
  return change
}

const FIELD_NAMES = ['title', 'question', 'area', 'club', 'misses', 'tried', 'chosenCoachId'] as const satisfies readonly (keyof ReviewFields)[]
