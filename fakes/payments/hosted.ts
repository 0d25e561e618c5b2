import type { ServerResponse } from 'node:http'
import { declineSession, paySession } from './checkout'
import type { StoredSession } from './objects'
import { checkoutPage, messagePage, successAddress } from './pages'
import { Refused } from './refusals'
import type { World } from './world'

const PATH = /^\/pay\/([^/]+)(?:\/(pay|decline|abandon))?$/

type Reply = { status: number, html: string } | { redirectTo: string }

/** Does what a request to the hosted page asks, without answering it yet. Undefined when no such page exists. */
export function visitHostedPage(world: World, method: string, path: string): Reply | undefined {
  const match = PATH.exec(path)
  const [, id = '', action] = match ?? []
  const isKnownRequest = match !== null && method === (action === undefined ? 'GET' : 'POST')
  if (!isKnownRequest) return undefined
  const session = world.store.state.sessions[decodeURIComponent(id)]
  if (session === undefined) {
    return { status: 404, html: messagePage('No such payment', 'This address belongs to no payment. Go back and start again.') }
  }
  try {
    return visit(world, session, action)
  }
  catch (error) {
    if (!(error instanceof Refused)) throw error
    return closedPage(session, { paid: 409, expired: 410 })
  }
}

function visit(world: World, session: StoredSession, action: string | undefined): Reply {
  const items = world.store.state.lineItems[session.id] ?? []
  if (action === 'pay') return { redirectTo: successAddress(paySession(world, session)) }
  if (action === 'decline') {
    declineSession(world, session)
    // 200 as on a real payment page: a decline is an ordinary outcome, not a broken page in the browser's console.
    return { status: 200, html: checkoutPage(session, items, 'The card was declined. Nothing was charged. You can try again.') }
  }
  if (action === 'abandon') {
    return session.cancel_url === null
      ? { status: 200, html: messagePage('Not paid', 'You can close this page.') }
      : { redirectTo: session.cancel_url }
  }
  return session.status === 'open' ? { status: 200, html: checkoutPage(session, items) } : closedPage(session, { paid: 200, expired: 200 })
}

function closedPage(session: StoredSession, status: { paid: number, expired: number }): Reply {
  if (session.status === 'complete') {
    const link = { href: successAddress(session), text: 'Go on' }
    return { status: status.paid, html: messagePage('Already paid', 'This was paid before. Nothing was charged a second time.', link) }
  }
  const link = session.cancel_url === null ? undefined : { href: session.cancel_url, text: 'Go back' }
  return { status: status.expired, html: messagePage('This payment has expired', 'Nothing was charged. Go back and start again.', link) }
}

export function sendHostedPage(response: ServerResponse, reply: Reply): void {
  if ('redirectTo' in reply) {
    response.writeHead(303, { Location: reply.redirectTo })
    response.end()
    return
  }
  response.writeHead(reply.status, {
    'Content-Type': 'text/html; charset=utf-8',
    'Cache-Control': 'no-store',
    'Content-Security-Policy': 'default-src \'none\'; style-src \'unsafe-inline\'; base-uri \'none\'; frame-ancestors \'none\'',
  })
  response.end(reply.html)
}
