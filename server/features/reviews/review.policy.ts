import type { ExpressionBuilder } from 'kysely'
import type { ReviewRole } from '#shared/domain/review/states'
import type { ViewerFacts } from '#server/context'
import type { Tables } from '#server/database/schema'

/** States in which the studio sees a review: it was sent and, where that was needed, paid for. */
const SENT = ['waiting', 'in_hand', 'new_film', 'answered', 'closed', 'withdrawn'] as const

/**
 * Which reviews a person may see, as a part of the query: what it leaves out does not exist for them.
 * Students see their own; guardians those of their juniors; coaches those sent to them or to whoever is free first; owners all that were sent.
 */
export function visibleTo(viewer: ViewerFacts) {
  return (eb: ExpressionBuilder<Tables, 'reviews'>) => {
    const wasSent = eb('reviews.state', 'in', SENT)
    const isTheirs = eb('reviews.student_id', '=', viewer.id)
    if (viewer.role === 'owner') return wasSent
    if (viewer.role === 'student') return isTheirs
    if (viewer.role === 'guardian') {
      return eb('reviews.student_id', 'in', eb.selectFrom('guardianships')
        .select('junior_id')
        .where('guardian_id', '=', viewer.id).where('ended_at_ms', 'is', null))
    }
    return eb.and([wasSent, eb.or([
      eb('reviews.chosen_coach_id', 'is', null),
      eb('reviews.chosen_coach_id', '=', viewer.id),
      eb('reviews.coach_id', '=', viewer.id),
    ])])
  }
}

/** In which roles a person meets a review. An owner who also coaches has two. */
export function rolesFor(viewer: ViewerFacts): ReviewRole[] {
  if (viewer.role === 'owner') return viewer.isCoach ? ['owner', 'coach'] : ['owner']
  return [viewer.role]
}

/** Physical limits are for those who answer and for the student's own side. */
export function mayReadLimits(viewer: ViewerFacts): boolean {
  return viewer.role !== 'owner' || viewer.isCoach
}
