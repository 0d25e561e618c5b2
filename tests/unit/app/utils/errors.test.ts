import { createServer } from 'node:http'
import type { Server } from 'node:http'
import { ofetch } from 'ofetch'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readErrorAnswer } from '~/utils/errors'

const refused = {
  statusCode: 422,
  statusMessage: 'Unprocessable',
  data: { code: 'invalid-fields', message: 'Look again.', fields: { email: 'Enter an address.' } },
}

let server: Server
let base = ''

beforeAll(async () => {
  server = createServer((request, response) => {
    if (request.url === '/refused') {
      response.writeHead(422, { 'content-type': 'application/json' }).end(JSON.stringify(refused))
    }
    else if (request.url === '/proxy') {
      response.writeHead(502, { 'content-type': 'text/html' }).end('<h1>Bad gateway</h1>')
    }
    else {
      request.socket.destroy()
    }
  })
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('No port.')
  base = `http://127.0.0.1:${address.port}`
})

afterAll(() => new Promise(resolve => server.close(resolve)))

async function failureOf(path: string): Promise<unknown> {
  return ofetch(`${base}${path}`, { retry: 0 }).then(
    () => {
      throw new Error('It did not fail.')
    },
    (error: unknown) => error,
  )
}

describe('readErrorAnswer', () => {
  it('reads an answer of ours from a failed fetch', async () => {
    expect(readErrorAnswer(await failureOf('/refused'))).toEqual({
      statusCode: 422,
      code: 'invalid-fields',
      message: 'Look again.',
      fields: { email: 'Enter an address.' },
    })
  })

  it('has words of its own for a proxy\'s page', async () => {
    const read = readErrorAnswer(await failureOf('/proxy'))
    expect(read).toMatchObject({ statusCode: 502, code: 'unknown', fields: {} })
    expect(read.message).not.toContain('gateway')
  })

  it('tells a connection that broke from an answer', async () => {
    expect(readErrorAnswer(await failureOf('/cut'))).toMatchObject({ statusCode: 0, code: 'no-answer' })
  })

  it('reads the same from an error that was wrapped, or whose data was taken out', async () => {
    const cut = await failureOf('/cut')
    expect(readErrorAnswer(new Error('wrapped', { cause: cut })).code).toBe('no-answer')
    expect(readErrorAnswer({ statusCode: 422, data: refused.data })).toMatchObject({ code: 'invalid-fields', message: 'Look again.' })
  })

  it.each([undefined, null, 'text', 7, {}, { data: null }, { data: { data: { code: 1, message: 'x' } } }, new Error('plain')])('answers %j with plain words', (error) => {
    const read = readErrorAnswer(error)
    expect(read).toMatchObject({ statusCode: 500, code: 'unknown', fields: {} })
    expect(read.message.length).toBeGreaterThan(20)
  })

  it('leaves out fields that are not text', () => {
    const read = readErrorAnswer({ statusCode: 422, data: { code: 'invalid-fields', message: 'Look again.', fields: { a: 'yes', b: 3 } } })
    expect(read.fields).toEqual({ a: 'yes' })
  })
})
