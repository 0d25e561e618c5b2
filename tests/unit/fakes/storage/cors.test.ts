import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { TestStorage } from './harness'
import { BUCKET, openTestStorage, sendRaw, signRaw } from './harness'

const PAGE = 'http://127.0.0.1:3000'
const path = `/${BUCKET}/film.mp4`
let storage: TestStorage

beforeAll(async () => {
  storage = await openTestStorage({ allowedOrigins: [PAGE] })
  await sendRaw(storage.url, { path, method: 'PUT', body: 'film' })
})
afterAll(() => storage.close())

function preflight(origin: string, method: string, headers = 'content-type,content-md5') {
  return fetch(`${storage.url}${path}`, {
    method: 'OPTIONS', headers: { 'Origin': origin, 'Access-Control-Request-Method': method, 'Access-Control-Request-Headers': headers },
  })
}

describe('pages of another origin', () => {
  it.each(['PUT', 'GET', 'HEAD'])('may %s after asking first', async (method) => {
    const response = await preflight(PAGE, method)
    expect(response.status).toBe(200)
    expect(response.headers.get('access-control-allow-origin')).toBe(PAGE)
    expect(response.headers.get('access-control-allow-methods')?.split(', ')).toContain(method)
    expect(response.headers.get('access-control-allow-headers')).toBe('content-type,content-md5')
    expect(response.headers.get('vary')).toContain('Origin')
  })

  it.each([[PAGE, 'DELETE'], [PAGE, 'POST'], ['http://127.0.0.1:3001', 'PUT'], ['null', 'PUT']])('from %s may not %s', async (origin, method) => {
    const response = await preflight(origin, method)
    expect([response.status, response.headers.get('access-control-allow-origin')]).toEqual([403, null])
  })

  it('see the entity tag and the range of what they are answered', async () => {
    const { url } = signRaw(storage.url, { path, expiresS: '60' })
    const response = await fetch(url, { headers: { Origin: PAGE, Range: 'bytes=0-1' } })
    expect([response.status, await response.text(), response.headers.get('access-control-allow-origin')]).toEqual([206, 'fi', PAGE])
    const exposed = response.headers.get('access-control-expose-headers')?.split(', ')
    expect(exposed).toEqual(expect.arrayContaining(['ETag', 'Content-Range']))
  })

  it('are shown refusals too, so that a page can tell why', async () => {
    const response = await fetch(`${storage.url}${path}`, { headers: { Origin: PAGE } })
    expect([response.status, response.headers.get('access-control-allow-origin')]).toEqual([403, PAGE])
  })

  it('not allowed are answered, but not shown the answer', async () => {
    const { url } = signRaw(storage.url, { path, expiresS: '60' })
    const response = await fetch(url, { headers: { Origin: 'http://127.0.0.1:3001' } })
    expect([response.status, response.headers.get('access-control-allow-origin')]).toEqual([200, null])
  })

  it('are all allowed when no list is given', async () => {
    const open = await openTestStorage()
    const response = await fetch(`${open.url}${path}`, { headers: { Origin: 'http://anywhere.example' } })
    await open.close()
    expect(response.headers.get('access-control-allow-origin')).toBe('*')
  })
})
