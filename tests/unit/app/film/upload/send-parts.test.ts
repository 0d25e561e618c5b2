import { describe, expect, it } from 'vitest'
import { PartError, sendParts, UploadStopped, type SendPlan, type SendPorts } from '~/film/upload/send-parts'

/** A store that remembers what arrived, and can be told to fail. */
function fakeStore(failures: Record<number, Array<PartError>> = {}) {
  const arrived: number[] = []
  const asked: number[][] = []
  const waits: number[] = []
  let underWay = 0
  let mostAtOnce = 0
  const ports: SendPorts = {
    async putPart(url, range, onSentBytes, signal) {
      underWay += 1
      mostAtOnce = Math.max(mostAtOnce, underWay)
      try {
        await new Promise(resolve => setTimeout(resolve, 1))
        signal.throwIfAborted()
        const failure = failures[range.number]?.shift()
        if (failure !== undefined) throw failure
        onSentBytes(range.toByte - range.fromByte)
        arrived.push(range.number)
      }
      finally {
        underWay -= 1
      }
    },
    async askParts(numbers) {
      asked.push(numbers)
      return { done: arrived.filter(number => numbers.includes(number)), parts: numbers.map(number => ({ number, url: `fresh-${number}` })) }
    },
    async wait(waitMs) {
      waits.push(waitMs)
    },
    random: () => 1,
  }
  return { ports, arrived, asked, waits, mostAtOnce: () => mostAtOnce }
}

function planOf(count: number, doneNumbers: number[] = []): SendPlan {
  return {
    fileBytes: count * 10 - 3,
    partBytes: 10,
    parts: Array.from({ length: count }, (_, index) => ({ number: index + 1, url: `first-${index + 1}` })),
    doneNumbers,
  }
}

const never = new AbortController().signal

describe('sendParts', () => {
  it('sends every part once, three at a time at most', async () => {
    const store = fakeStore()
    await sendParts(planOf(9), store.ports, () => {}, never)
    expect([...store.arrived].sort((a, b) => a - b)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9])
    expect(store.mostAtOnce()).toBe(3)
  })

  it('sends only what the store lacks and reports the whole', async () => {
    const store = fakeStore()
    const sent: number[] = []
    await sendParts(planOf(4, [1, 3]), store.ports, ({ sentBytes }) => sent.push(sentBytes), never)
    expect([...store.arrived].sort((a, b) => a - b)).toEqual([2, 4])
    expect(sent[0]).toBe(20)
    expect(sent.at(-1)).toBe(37)
  })

  it('tries a part again after a fault, with growing waits, and asks the store first when the line broke', async () => {
    const store = fakeStore({ 2: [new PartError({ kind: 'status', status: 503 }), new PartError({ kind: 'network' })] })
    await sendParts(planOf(3), store.ports, () => {}, never)
    expect(store.arrived).toContain(2)
    expect(store.waits).toEqual([1000, 2000])
    expect(store.asked).toEqual([[2]])
  })

  it('throws all addresses away when one has run out', async () => {
    const store = fakeStore({ 1: [new PartError({ kind: 'status', status: 403 })] })
    const urls: string[] = []
    const putPart: SendPorts['putPart'] = (url, ...rest) => {
      urls.push(url)
      return store.ports.putPart(url, ...rest)
    }
    await sendParts(planOf(6), { ...store.ports, putPart }, () => {}, never)
    expect(urls.slice(0, 3)).toEqual(['first-1', 'first-2', 'first-3'])
    expect(urls.slice(3).sort()).toEqual(['fresh-1', 'fresh-4', 'fresh-5', 'fresh-6'])
  })

  it('says that it waits only while nothing moves', async () => {
    const store = fakeStore({ 1: [new PartError({ kind: 'network' })], 2: [new PartError({ kind: 'network' })] })
    const told: boolean[] = []
    await sendParts(planOf(2), store.ports, ({ isWaiting }) => told.push(isWaiting), never)
    expect(told).toContain(true)
    expect(told.at(-1)).toBe(false)
    expect(told.indexOf(true)).toBeGreaterThan(1)
  })

  it('asks for a fresh address when one has run out', async () => {
    const store = fakeStore({ 1: [new PartError({ kind: 'status', status: 403 })] })
    await sendParts(planOf(1), store.ports, () => {}, never)
    expect(store.asked).toEqual([[1]])
    expect(store.arrived).toEqual([1])
  })

  it('does not send again what arrived although its answer was lost', async () => {
    const store = fakeStore({ 1: [new PartError({ kind: 'status', status: 403 })] })
    store.arrived.push(1)
    await sendParts(planOf(1), store.ports, () => {}, never)
    expect(store.arrived).toEqual([1])
  })

  it('stops all parts when one cannot arrive', async () => {
    const store = fakeStore({ 2: [new PartError({ kind: 'status', status: 404 })] })
    await expect(sendParts(planOf(30), store.ports, () => {}, never)).rejects.toThrow(UploadStopped)
    expect(store.arrived.length).toBeLessThan(10)
  })

  it('ends with the reason when it is called off', async () => {
    const controller = new AbortController()
    const store = fakeStore()
    const sending = sendParts(planOf(30), store.ports, () => {}, controller.signal)
    controller.abort(new Error('called off'))
    await expect(sending).rejects.toThrow('called off')
    expect(store.arrived.length).toBeLessThan(30)
  })
})
