import type { H3Event } from 'h3'
import type { Role } from '#shared/types/people'
import type { Ctx, SignedInCtx } from '#server/context'
import { contextOf } from '#server/context'
import { findViewer } from '#server/features/sessions/session.service'
import { Refusal } from '#server/refusal'
import { runningApp } from '#server/running'

/** The context of a request that anyone may make; `viewer` is there when somebody is signed in. */
export async function anyone(event: H3Event): Promise<Ctx> {
  const app = runningApp()
  return contextOf(app, {
    viewer: await findViewer(event, app, app.clock.nowMs()),
    requestId: event.context.requestId ?? '',
    repeatable: event.context.repeatable,
  })
}

/**
 * The context of a signed-in person in one of `roles` (any, when none is named). `coach` takes in owners who also coach.
 * @throws Refusal `not-signed-in` (401) or `not-allowed` (403).
 */
export async function signedIn(event: H3Event, ...roles: Role[]): Promise<SignedInCtx> {
  const { viewer, ...rest } = await anyone(event)
  if (!viewer) throw new Refusal('not-signed-in', 'not-signed-in', 'Sign in first.')
  const isIncluded = roles.length === 0 || roles.includes(viewer.role) || (roles.includes('coach') && viewer.isCoach)
  if (!isIncluded) throw new Refusal('not-allowed', 'not-allowed', 'Your account cannot do this.')
  return { ...rest, viewer }
}
