import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { PartError, PARTS_AT_ONCE_COUNT, sendParts, type SendPlan, type SendPorts } from '~/film/upload/send-parts'

/**
 * What becomes of one PUT: it arrives; the line breaks under way; it arrives but the answer is lost; the store is busy; the address
 * has run out.
 */
type Fate = 'arrives' | 'breaks' | 'answer-lost' | 'busy' | 'expired'

const fate = fc.constantFrom<Fate>('arrives', 'breaks', 'answer-lost', 'busy', 'expired')
const PART_BYTES = 10

interface Put {
  number: number
  fate: Fate
  /** What the store had when the PUT began. */
  hadBefore: boolean
}

/** A store behind a line whose faults are drawn beforehand; when they are used up all arrives. */
class Store {
  readonly has = new Set<number>()
  readonly puts: Put[] = []
  readonly waits: number[] = []
  underWay = new Set<number>()
  mostAtOnce = 0
  #refusedInARow = new Map<number, number>()

  constructor(private readonly fates: Fate[], private readonly turns: () => Promise<void>) {}

  readonly ports: SendPorts = {
    putPart: async (_url, range, onSentBytes, signal) => {
      const { number } = range
      const put: Put = { number, fate: this.#draw(number), hadBefore: this.has.has(number) }
      this.puts.push(put)
      this.underWay.add(number)
      this.mostAtOnce = Math.max(this.mostAtOnce, this.underWay.size)
      try {
        await this.turns()
        signal.throwIfAborted()
        onSentBytes(Math.floor((range.toByte - range.fromByte) / 2))
        await this.turns()
        signal.throwIfAborted()
        if (put.fate === 'arrives' || put.fate === 'answer-lost') this.has.add(number)
        if (put.fate === 'breaks' || put.fate === 'answer-lost') throw new PartError({ kind: 'network' })
        if (put.fate === 'busy') throw new PartError({ kind: 'status', status: 503 })
        if (put.fate === 'expired') throw new PartError({ kind: 'status', status: 403 })
        onSentBytes(range.toByte - range.fromByte)
      }
      finally {
        this.underWay.delete(number)
      }
    },
    askParts: async (numbers) => {
      await this.turns()
      return { done: [...this.has], parts: numbers.map(number => ({ number, url: `fresh-${number}` })) }
    },
    wait: async (waitMs) => {
      this.waits.push(waitMs)
      await this.turns()
    },
    random: () => 0.5,
  }

  /** Four refusals of one part would end the film rightly, so that this schedule stops short of them. */
  #draw(number: number): Fate {
    const drawn = this.fates.shift() ?? 'arrives'
    const refused = this.#refusedInARow.get(number) ?? 0
    if (drawn !== 'expired') return drawn
    if (refused >= 3) return 'arrives'
    this.#refusedInARow.set(number, refused + 1)
    return 'expired'
  }
}

const planOf = (store: Store, partCount: number): SendPlan => ({
  fileBytes: partCount * PART_BYTES - 3,
  partBytes: PART_BYTES,
  parts: Array.from({ length: partCount }, (_, index) => ({ number: index + 1, url: `first-${index + 1}` })),
  doneNumbers: [...store.has],
})

/** Some turns of the event loop, so that lanes overtake each other. */
const turnsFrom = (lengths: number[]) => async () => {
  const length = lengths.shift() ?? 1
  for (let turn = 0; turn < length; turn += 1) await Promise.resolve()
}

const countOf = (puts: readonly Put[], number: number) => puts.filter(put => put.number === number).length
const never = new AbortController().signal

describe('sending over a line that fails by any schedule', () => {
  const schedule = {
    partCount: fc.integer({ min: 1, max: 25 }),
    fates: fc.array(fate, { maxLength: 60 }),
    lengths: fc.array(fc.integer({ min: 1, max: 12 }), { maxLength: 300 }),
  }

  it('[film.1] brings every part, sends none that the store has, and again only what failed', async () => {
    await fc.assert(fc.asyncProperty(fc.record(schedule), async ({ partCount, fates, lengths }) => {
      const store = new Store([...fates], turnsFrom([...lengths]))
      let last = { sentBytes: 0, isWaiting: true }
      await sendParts(planOf(store, partCount), store.ports, (progress) => { last = progress }, never)
      expect([...store.has].sort((a, b) => a - b)).toEqual(Array.from({ length: partCount }, (_, index) => index + 1))
      expect(store.puts.filter(put => put.hadBefore)).toEqual([])
      for (let number = 1; number <= partCount; number += 1) {
        const failed = store.puts.filter(put => put.number === number && put.fate !== 'arrives' && put.fate !== 'answer-lost').length
        expect(countOf(store.puts, number)).toBe(failed + 1)
      }
      expect(store.mostAtOnce).toBeLessThanOrEqual(PARTS_AT_ONCE_COUNT)
      expect(last).toMatchObject({ sentBytes: partCount * PART_BYTES - 3, isWaiting: false })
    }), { numRuns: 500 })
  })

  it('[film.1] sends again after each reload at most the parts that were in flight, each once', async () => {
    await fc.assert(fc.asyncProperty(fc.record({ ...schedule, cuts: fc.array(fc.integer({ min: 0, max: 40 }), { minLength: 1, maxLength: 5 }) }), async ({ partCount, lengths, cuts }) => {
      const store = new Store([], turnsFrom([...lengths]))
      const allowed = new Map<number, number>()
      for (const turnsBefore of cuts) {
        const reload = new AbortController()
        const sending = sendParts(planOf(store, partCount), store.ports, () => {}, reload.signal).catch(() => undefined)
        for (let turn = 0; turn < turnsBefore; turn += 1) await Promise.resolve()
        const inFlight = [...store.underWay]
        reload.abort(new Error('reload'))
        expect(inFlight.length).toBeLessThanOrEqual(PARTS_AT_ONCE_COUNT)
        for (const number of inFlight) allowed.set(number, (allowed.get(number) ?? 0) + 1)
        await sending
      }
      await sendParts(planOf(store, partCount), store.ports, () => {}, never)
      expect(store.has.size).toBe(partCount)
      expect(store.puts.filter(put => put.hadBefore)).toEqual([])
      for (let number = 1; number <= partCount; number += 1) {
        expect(countOf(store.puts, number)).toBeGreaterThanOrEqual(1)
        expect(countOf(store.puts, number)).toBeLessThanOrEqual(1 + (allowed.get(number) ?? 0))
      }
    }), { numRuns: 500 })
  })

  it('reports bytes that never pass the file and never go below what has arrived', async () => {
    await fc.assert(fc.asyncProperty(fc.record(schedule), async ({ partCount, fates, lengths }) => {
      const store = new Store([...fates], turnsFrom([...lengths]))
      await sendParts(planOf(store, partCount), store.ports, ({ sentBytes, doneNumbers }) => {
        expect(sentBytes).toBeLessThanOrEqual(partCount * PART_BYTES - 3)
        expect(sentBytes).toBeGreaterThanOrEqual(doneNumbers.length * PART_BYTES - 3)
        expect(new Set(doneNumbers).size).toBe(doneNumbers.length)
      }, never)
    }), { numRuns: 200 })
  })
})
