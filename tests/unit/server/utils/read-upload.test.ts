import type { Server } from 'node:http'
import { createServer, request } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { readdir } from 'node:fs/promises'
import { createApp, defineEventHandler, setResponseStatus, toNodeListener } from 'h3'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readUpload } from '#server/utils/read-upload'
import { Refusal } from '#server/refusal'

const MAX_BYTES = 100_000
let server: Server
let port: number

beforeAll(async () => {
  const app = createApp()
  app.use(defineEventHandler(async (event) => {
    try {
      const files = await readUpload(event, { maxBytes: MAX_BYTES, maxFiles: 1 })
      return { files: files.map(({ field, bytes }) => ({ field, hex: bytes.toString('hex') })) }
    }
    catch (error) {
      if (!(error instanceof Refusal)) throw error
      setResponseStatus(event, 422)
      return { kind: error.kind, code: error.code }
    }
  }))
  server = createServer(toNodeListener(app))
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  port = addressOf(server).port
})
afterAll(() => new Promise(resolve => server.close(resolve)))

function addressOf(listening: Server): AddressInfo {
  const address = listening.address()
  if (address === null || typeof address === 'string') throw new Error('It does not listen.')
  return address
}

/** Sends raw bytes, so that headers and body can be wrong on purpose. */
function post(body: Buffer, headers: Record<string, string>): Promise<unknown> {
  return new Promise((resolve, reject) => {
    const sending = request({ host: '127.0.0.1', port, method: 'PUT', headers }, (response) => {
      const chunks: Buffer[] = []
      response.on('data', (chunk: Buffer) => chunks.push(chunk))
      response.on('end', () => resolve(JSON.parse(Buffer.concat(chunks).toString())))
    })
    sending.on('error', reject)
    sending.end(body)
  })
}

const FORM = { 'content-type': 'multipart/form-data; boundary=edge' }

function part(field: string, bytes: Buffer, fileName = 'me.png'): Buffer {
  const head = `--edge\r\nContent-Disposition: form-data; name="${field}"; filename="${fileName}"\r\nContent-Type: image/png\r\n\r\n`
  return Buffer.concat([Buffer.from(head), bytes, Buffer.from('\r\n')])
}

const END = Buffer.from('--edge--\r\n')

describe('reading an upload', () => {
  it('gives the bytes of a file as they were sent, whatever its name', async () => {
    const bytes = Buffer.from([0, 255, 13, 10, 45, 45, 101, 100, 103, 101, 0])
    expect(await post(Buffer.concat([part('picture', bytes, '../../etc/passwd'), END]), FORM))
      .toEqual({ files: [{ field: 'picture', hex: bytes.toString('hex') }] })
  })

  it('gives an empty file as an empty file, and no file as none', async () => {
    expect(await post(Buffer.concat([part('picture', Buffer.alloc(0)), END]), FORM)).toEqual({ files: [{ field: 'picture', hex: '' }] })
    expect(await post(END, FORM)).toEqual({ files: [] })
  })

  it('takes a file of the most bytes, and refuses one more, told or found out', async () => {
    const most = Buffer.concat([part('picture', Buffer.alloc(MAX_BYTES, 1)), END])
    expect(await post(most, FORM)).toMatchObject({ files: [{ field: 'picture' }] })
    const tooMuch = { kind: 'too-large', code: 'too-large' }
    expect(await post(Buffer.concat([part('picture', Buffer.alloc(MAX_BYTES + 1, 1)), END]), FORM)).toEqual(tooMuch)
    const huge = Buffer.concat([part('picture', Buffer.alloc(3 * MAX_BYTES, 1)), END])
    expect(await post(huge, { ...FORM, 'content-length': String(huge.length) })).toEqual(tooMuch)
    expect(await post(huge, { ...FORM, 'transfer-encoding': 'chunked' })).toEqual(tooMuch)
  })

  it('refuses a second file', async () => {
    expect(await post(Buffer.concat([part('picture', Buffer.from('a')), part('picture', Buffer.from('b')), END]), FORM)).toMatchObject({ kind: 'too-large' })
  })

  it.each([
    ['a form that is cut short', part('picture', Buffer.alloc(500, 1)), FORM],
    ['a form whose boundary never comes', Buffer.from('nothing of the kind'), FORM],
    ['a form without a boundary in its header', Buffer.concat([part('picture', Buffer.from('a')), END]), { 'content-type': 'multipart/form-data; charset=utf-8' }],
    ['another kind of body', Buffer.from('{}'), { 'content-type': 'application/json' }],
    ['bytes alone', Buffer.alloc(20, 1), { 'content-type': 'application/octet-stream' }],
    ['a body of no kind', Buffer.alloc(20, 1), {}],
    ['a part in an encoding that nobody knows', Buffer.from('--edge\r\nContent-Disposition: form-data; name="picture"; filename="a"\r\nContent-Type: image/png\r\nContent-Transfer-Encoding: rot13\r\n\r\nabc\r\n--edge--\r\n'), FORM],
  ])('refuses %s', async (_what, body, headers) => {
    expect(await post(body, headers)).toEqual({ kind: 'malformed', code: 'not-a-form' })
  })

  it('refuses more words than a form has', async () => {
    const field = (name: string, words: string) => Buffer.from(`--edge\r\nContent-Disposition: form-data; name="${name}"\r\n\r\n${words}\r\n`)
    expect(await post(Buffer.concat([field('caption', 'x'.repeat(70_000)), END]), FORM)).toMatchObject({ kind: 'too-large' })
    expect(await post(Buffer.concat([...Array.from({ length: 21 }, (_, index) => field(`f${index}`, 'x')), END]), FORM)).toMatchObject({ kind: 'too-large' })
  })

  it('goes on serving after a sender who hung up in the middle', async () => {
    await new Promise<void>((resolve) => {
      const sending = request({ host: '127.0.0.1', port, method: 'PUT', headers: { ...FORM, 'content-length': '5000' } })
      sending.on('error', () => resolve())
      sending.write(part('picture', Buffer.alloc(100, 1)))
      setTimeout(() => sending.destroy(), 50)
    })
    expect(await post(Buffer.concat([part('picture', Buffer.from('a')), END]), FORM)).toEqual({ files: [{ field: 'picture', hex: '61' }] })
  })

  it('leaves no file behind', async () => {
    const before = await readdir(tmpdir())
    await post(Buffer.concat([part('picture', Buffer.alloc(5000, 1)), END]), FORM)
    await post(part('picture', Buffer.alloc(5000, 1)), FORM)
    const isUpload = (name: string) => /^[a-z0-9]{25}$/.test(name) && !before.includes(name)
    expect((await readdir(tmpdir())).filter(isUpload)).toEqual([])
  })
})
