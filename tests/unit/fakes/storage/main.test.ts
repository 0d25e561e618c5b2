import type { ChildProcess } from 'node:child_process'
import { spawn } from 'node:child_process'
import { createHash } from 'node:crypto'
import { once } from 'node:events'
import { mkdtemp, readFile, rm } from 'node:fs/promises'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import process from 'node:process'
import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { GetObjectCommand, PutObjectCommand } from '@aws-sdk/client-s3'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ACCESS_KEY, BUCKET, createClient, MIB, patternBytes, REGION, SECRET_KEY } from './harness'

const JITI = resolve('node_modules/jiti/lib/jiti-cli.mjs')
const MAIN = resolve('fakes/storage/main.ts')
const FILM_MIB = 200
const MAX_RISE_MIB = 50

let dataDir: string
let endpoint: string
const started: ChildProcess[] = []

async function findFreePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1')
  await once(probe, 'listening')
  const address = probe.address()
  probe.close()
  await once(probe, 'close')
  return typeof address === 'object' && address !== null ? address.port : 0
}

function start(settings: Record<string, string>): ChildProcess {
  const child = spawn(process.execPath, [JITI, MAIN], { env: { PATH: process.env.PATH, ...settings }, stdio: ['ignore', 'pipe', 'pipe'] })
  started.push(child)
  return child
}

async function firstWords(stream: Readable | null): Promise<string> {
  if (!stream) return ''
  const [chunk] = await once(stream, 'data')
  return String(chunk)
}

function settings(): Record<string, string> {
  return {
    STORAGE_ENDPOINT: endpoint, STORAGE_REGION: REGION, STORAGE_BUCKET: BUCKET,
    STORAGE_ACCESS_KEY: ACCESS_KEY, STORAGE_SECRET_KEY: SECRET_KEY, FAKE_STORAGE_DIR: dataDir,
  }
}

beforeAll(async () => {
  dataDir = await mkdtemp(join(tmpdir(), 'turfnote-storage-'))
  endpoint = `http://127.0.0.1:${await findFreePort()}`
})
afterAll(async () => {
  for (const child of started) if (child.exitCode === null && child.signalCode === null) child.kill('SIGKILL')
  await rm(dataDir, { recursive: true, force: true })
})

/** VmRSS or its high-water mark, as the kernel counts them, in MiB. */
async function memoryMib(pid: number, field: 'VmRSS' | 'VmHWM'): Promise<number> {
  const status = await readFile(`/proc/${pid}/status`, 'utf8')
  return Number(new RegExp(`^${field}:\\s+(\\d+) kB`, 'm').exec(status)?.[1]) / 1024
}

function* film(hash: ReturnType<typeof createHash>): Generator<Buffer> {
  const piece = patternBytes(MIB, 1)
  for (let index = 0; index < FILM_MIB; index++) {
    const fresh = Buffer.from(piece)
    fresh.writeUInt32BE(index)
    hash.update(fresh)
    yield fresh
  }
}

describe('the stand-in as a program of its own', () => {
  it('says where it listens, and stops cleanly when told to', async () => {
    for (const signal of ['SIGTERM', 'SIGINT'] as const) {
      const child = start(settings())
      expect(await firstWords(child.stdout)).toBe(`storage stand-in listening on ${endpoint}, bucket ${BUCKET}\n`)
      expect((await fetch(`${endpoint}/__fake__/state`)).status).toBe(200)
      child.kill(signal)
      expect(await once(child, 'exit')).toEqual([0, null])
    }
  }, 30_000)

  it('says which settings are missing', async () => {
    const child = start({ ...settings(), STORAGE_BUCKET: '' })
    expect(await firstWords(child.stderr)).toContain('STORAGE_BUCKET')
    expect(await once(child, 'exit')).toEqual([1, null])
  }, 30_000)

  it.runIf(process.platform === 'linux')(`takes and gives ${FILM_MIB} MiB with at most ${MAX_RISE_MIB} MiB more memory`, async () => {
    const child = start(settings())
    await firstWords(child.stdout)
    const pid = child.pid ?? 0
    const client = createClient(endpoint)
    // Once through every path, so that code and buffers that stay anyhow are not counted to the film.
    await client.send(new PutObjectCommand({ Bucket: BUCKET, Key: 'warm', Body: patternBytes(MIB, 2) }))
    await (await client.send(new GetObjectCommand({ Bucket: BUCKET, Key: 'warm' }))).Body?.transformToByteArray()
    const beforeMib = await memoryMib(pid, 'VmRSS')

    const sent = createHash('md5')
    const { ETag } = await client.send(new PutObjectCommand({
      Bucket: BUCKET, Key: 'film', Body: Readable.from(film(sent), { objectMode: false, highWaterMark: MIB }), ContentLength: FILM_MIB * MIB,
    }))
    expect(ETag).toBe(`"${sent.digest('hex')}"`)
    expect(await memoryMib(pid, 'VmHWM') - beforeMib).toBeLessThanOrEqual(MAX_RISE_MIB)

    const received = createHash('md5')
    const { Body } = await client.send(new GetObjectCommand({ Bucket: BUCKET, Key: 'film' }))
    if (!(Body instanceof Readable)) throw new Error('The SDK gave no stream.')
    await pipeline(Body, received)
    expect(`"${received.digest('hex')}"`).toBe(ETag)
    expect(await memoryMib(pid, 'VmHWM') - beforeMib).toBeLessThanOrEqual(MAX_RISE_MIB)
    client.destroy()
    child.kill('SIGTERM')
    await once(child, 'exit')
  }, 60_000)
})
