import { once } from 'node:events'
import type { AddressInfo } from 'node:net'
import { createServer } from 'node:http'
import { describe, expect, it } from 'vitest'
import { median, rowFrom, tableOf } from '#tests/bench/bench'
import { LoadConnection, requestBytes } from '#tests/bench/load/connection'
import { cpuMsOf } from '#tests/bench/load/cpu'

describe('figures of a bench', () => {
  it('takes the middle, or the mean of the two in the middle', () => {
    expect(median([9, 1, 5])).toBe(5)
    expect(median([4, 1, 2, 10])).toBe(3)
    expect(() => median([])).toThrow(RangeError)
  })

  it('[house.6] compares run by run: a machine that slows down half way slows both sides', () => {
    const pairs = [{ value: 60, yardstick: 100 }, { value: 30, yardstick: 50 }, { value: 12, yardstick: 20 }]
    expect(rowFrom('queue', 'per second', pairs, 0.5)).toEqual({
      metric: 'queue', value: 30, unit: 'per second', yardstick: 50, ratio: 0.6, aim: 0.5, met: true,
    })
  })

  it('[house.6] misses an aim by a hair', () => {
    expect(rowFrom('queue', 'per second', [{ value: 49.9, yardstick: 100 }], 0.5).met).toBe(false)
    expect(rowFrom('queue', 'per second', [{ value: 50, yardstick: 100 }], 0.5).met).toBe(true)
  })

  it('says in the table which aim was missed', () => {
    const table = tableOf([rowFrom('queue', 'per second', [{ value: 20, yardstick: 100 }], 0.5)])
    expect(table).toMatch(/queue +20\.0 per second +100 per second +0\.20 +≥ 0\.5 +MISSED/)
  })
})

describe('the load generator\'s connection', () => {
  it('sends what it was given and keeps the connection for the next', async () => {
    const seen: string[] = []
    const server = createServer((request, response) => {
      let body = ''
      request.on('data', chunk => body += chunk)
      request.on('end', () => {
        seen.push(`${request.method} ${request.url} ${request.headers.cookie} ${body} ${request.socket.remotePort}`)
        response.statusCode = seen.length === 1 ? 200 : 409
        response.end(`answer ${seen.length}`)
      })
    }).listen(0, '127.0.0.1')
    await once(server, 'listening')
    const port = portOf(server.address())
    const connection = await LoadConnection.open(port)
    const bytes = requestBytes({ method: 'POST', path: '/deeds', headers: { cookie: 'a=b' }, body: '{"é":1}' }, port)
    expect(await connection.send(bytes)).toEqual({ status: 200, body: 'answer 1' })
    expect(await connection.send(bytes)).toEqual({ status: 409, body: 'answer 2' })
    connection.close()
    server.close()
    expect(seen[0]).toMatch(/^POST \/deeds a=b \{"é":1\} \d+$/)
    expect(seen[1]).toBe(seen[0])
  })

  it('puts an answer together that comes in pieces', async () => {
    const server = createServer((_, response) => {
      response.setHeader('content-length', 10)
      response.write('first')
      setTimeout(() => response.end('later'), 30)
    }).listen(0, '127.0.0.1')
    await once(server, 'listening')
    const port = portOf(server.address())
    const connection = await LoadConnection.open(port)
    expect((await connection.send(requestBytes({ method: 'GET', path: '/', headers: {}, body: '' }, port))).body).toBe('firstlater')
    connection.close()
    server.close()
  })

  it('fails rather than wait when the server hangs up', async () => {
    const server = createServer((request) => {
      request.socket.destroy()
    }).listen(0, '127.0.0.1')
    await once(server, 'listening')
    const port = portOf(server.address())
    const connection = await LoadConnection.open(port)
    await expect(connection.send(requestBytes({ method: 'GET', path: '/', headers: {}, body: '' }, port))).rejects.toThrow(/closed/)
    server.close()
  })
})

describe('computing time', () => {
  it('counts what this process itself computed, to a hundredth of a second', () => {
    const own = process.cpuUsage()
    const measured = cpuMsOf(process.pid)
    if (measured === undefined) return expect(process.platform).not.toBe('linux')
    expect(Math.abs(measured - (own.user + own.system) / 1000)).toBeLessThan(100)
  })

  it('says nothing of a process that is not there', () => {
    expect(cpuMsOf(2 ** 30)).toBeUndefined()
  })
})

function portOf(address: AddressInfo | string | null): number {
  if (address === null || typeof address === 'string') throw new Error('The server listens on no port.')
  return address.port
}
