import { randomUUID } from 'node:crypto'
import { mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as wait } from 'node:timers/promises'
import SQLite from 'better-sqlite3'
import { z } from 'zod'
import { addressesFrom } from '#fakes/demo/addresses'
import { startBuiltApp } from '#fakes/demo/app-process'
import { appEnvironment } from '#fakes/demo/environment'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { startStandIns } from '#fakes/demo/stand-ins'
import { endChild, nextMessage, startChild } from '../load/child'
import type { LoadRequest } from '../load/job'
import { makeStudio } from './studio'

const ADDRESSES = addressesFrom(6600, 6610)
const YARDSTICK_PORT = 6690
const DATA_DIR = join('.bench', 'data')
const DRAIN_LIMIT_MS = 120_000

/** One of the two that are under load. */
export interface Server {
  port: number
  pid: number
}

/** The built server on a seeded database, and the yardstick beside it; only one of them is under load at a time. */
export interface House {
  app: Server
  yardstick: Server
  /** The reviews that wait, in order of promise. */
  reviewIds: string[]
  /** As the product's own pages send it, from a coach who signed in. */
  request(method: 'GET' | 'POST', path: string, body?: unknown): LoadRequest
  /** Until every letter is out: what one run leaves to do must not slow the next. */
  untilQuiet(): Promise<void>
  close(): Promise<void>
}

export async function openHouse(reviewCount: number): Promise<House> {
  rmSync(DATA_DIR, { recursive: true, force: true })
  mkdirSync(DATA_DIR, { recursive: true })
  const environment: Record<string, string> = { ...appEnvironment(ADDRESSES, DATA_DIR), LIMITS_FACTOR: '100000', ...profiling() }
  const opened: (() => Promise<void>)[] = []
  const close = async (): Promise<void> => {
    for (const end of opened.reverse()) await end()
    rmSync(DATA_DIR, { recursive: true, force: true })
  }
  try {
    const standIns = await startStandIns(ADDRESSES, DATA_DIR)
    opened.push(() => standIns.close())
    const reviewIds = await makeStudio(environment, reviewCount)
    const yardstick = startChild('tests/bench/api/yardstick.ts', {
      PORT: String(YARDSTICK_PORT), SHOWN_PATH: environment.DATABASE_PATH ?? '', WRITTEN_PATH: join(DATA_DIR, 'yardstick.sqlite'),
    })
    opened.push(() => endChild(yardstick))
    await nextMessage(yardstick, 20_000)
    const app = await startBuiltApp(environment, { isQuiet: true })
    opened.push(() => app.stop())
    const cookie = await signIn(app.url, 'coach@demo.turfnote.test')
    return {
      app: { port: ADDRESSES.appPort, pid: app.pid },
      yardstick: { port: YARDSTICK_PORT, pid: yardstick.pid ?? 0 },
      reviewIds,
      request: (method, path, body) => requestOf({ method, path, body, cookie, origin: app.url }),
      untilQuiet: () => untilNoLetterWaits(environment.DATABASE_PATH ?? ''),
      close,
    }
  }
  catch (error) {
    await close()
    throw error
  }
}

interface Asked {
  method: 'GET' | 'POST'
  path: string
  body: unknown
  cookie: string
  origin: string
}

function requestOf({ method, path, body, cookie, origin }: Asked): LoadRequest {
  const headers = { 'sec-fetch-site': 'same-origin', cookie, 'accept': 'application/json' }
  if (method === 'GET') return { method, path, headers, body: '' }
  return {
    method, path, body: JSON.stringify(body), headers: { ...headers, origin, 'content-type': 'application/json', 'idempotency-key': randomUUID() },
  }
}

/** `BENCH_PROFILE=<folder>` writes a profile of the server there, to be opened in a browser's developer tools. */
function profiling(): Record<string, string> {
  const folder = process.env.BENCH_PROFILE
  if (!folder) return {}
  mkdirSync(folder, { recursive: true })
  return { BENCH_PROFILE: folder, NODE_OPTIONS: '--import ./tests/bench/profile.mjs' }
}

async function signIn(url: string, email: string): Promise<string> {
  const response = await fetch(`${url}/api/session`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', 'origin': url },
    body: JSON.stringify({ email, password: DEMO_PASSWORD }),
  })
  if (!response.ok) throw new Error(`Signing in failed: ${await response.text()}`)
  return response.headers.getSetCookie().map(cookie => cookie.split(';')[0]).join('; ')
}

const countSchema = z.object({ count: z.number() })

async function untilNoLetterWaits(databasePath: string): Promise<void> {
  const handle = new SQLite(databasePath, { readonly: true })
  try {
    const waiting = handle.prepare('select count(*) as count from outbox where state = \'waiting\'')
    const deadlineMs = Date.now() + DRAIN_LIMIT_MS
    while (countSchema.parse(waiting.get()).count > 0) {
      if (Date.now() > deadlineMs) throw new Error(`Letters still waited after ${DRAIN_LIMIT_MS / 1000} s.`)
      await wait(100)
    }
  }
  finally {
    handle.close()
  }
}
