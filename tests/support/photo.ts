import { randomUUID } from 'node:crypto'
import type { DemoKey } from '#fakes/demo/people'
import type { World } from './world'

/** One grey pixel. */
export const PIXEL = Buffer.from('iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAIAAACQd1PeAAAACXBIWXMAAAPoAAAD6AG1e1JrAAAADElEQVQImWNoaGgAAAMEAYEezv+mAAAAAElFTkSuQmCC', 'base64')

export interface PhotoOptions {
  as?: DemoKey
  kind?: string
  field?: string
  key?: string
  bytes?: Uint8Array
}

/** Sends a photograph as a page does: the browser makes the form and a boundary of its own each time. */
export async function sendPhoto(world: World, reviewId: string, { as = 'student', kind = 'grip', field = 'photo', key = randomUUID(), bytes = PIXEL }: PhotoOptions = {}) {
  const form = new FormData()
  form.append(field, new Blob([new Uint8Array(bytes)], { type: 'image/jpeg' }), '../mark.jpg')
  const response = await fetch(`${world.url}/api/reviews/${reviewId}/photos?kind=${kind}`, {
    method: 'POST', body: form, headers: { 'sec-fetch-site': 'same-origin', 'cookie': world.cookie(as), 'idempotency-key': key },
  })
  const body: unknown = await response.json()
  return { status: response.status, body }
}
