import { describe, expect, it } from 'vitest'
import type { PacketTime } from '~/film/prepare/packet-run'
import { findExactRun, findWholeRun, listShownFrames, longestKeyGapTicks } from '~/film/prepare/packet-run'

/** Packets in decode order, written as their frame numbers; key frames carry a K. */
function packets(...names: string[]): PacketTime[] {
  return names.map(name => ({ tick: Number(name.replace('K', '')), isKey: name.endsWith('K'), lengthTicks: 1, bytes: 100 }))
}

/** Two groups with frames that lean on later ones, as phones and x264 write them. */
const REORDERED = packets('0K', '3', '1', '2', '4K', '7', '5', '6')
/** The second group begins with frames shown before its key frame. */
const OPEN = packets('0K', '1', '4K', '2', '3', '5')

describe('listShownFrames', () => {
  it('sorts, and counts two frames at one instant once', () => {
    expect(listShownFrames(packets('0K', '2', '1', '1'), undefined)).toEqual({ frameTicks: [0, 1, 2], lengthTicks: 3 })
  })

  it('leaves out what the edit list hides, and ends where it says', () => {
    expect(listShownFrames(packets('-2K', '-1', '0', '1', '2'), { startTick: 0, endTick: 1.5 })).toEqual({ frameTicks: [0, 1], lengthTicks: 1.5 })
  })

  it('has nothing of an empty film', () => {
    expect(listShownFrames([], undefined)).toEqual({ frameTicks: [], lengthTicks: 0 })
  })
})

describe('longestKeyGapTicks', () => {
  it('counts to the next key frame and to the end', () => {
    expect(longestKeyGapTicks(REORDERED, [0, 1, 2, 3, 4, 5, 6, 7], 8)).toBe(4)
    expect(longestKeyGapTicks(packets('0K', '1K', '2'), [0, 1, 2], 5)).toBe(4)
  })

  it('counts from the start when the first frame shown is no key frame', () => {
    expect(longestKeyGapTicks(packets('-1K', '0', '1', '2K'), [0, 1, 2], 3)).toBe(2)
  })
})

describe('findExactRun', () => {
  it('finds whole groups', () => {
    expect(findExactRun(REORDERED, { firstTick: 0, lastTick: 3 })).toEqual({ from: 0, to: 4 })
    expect(findExactRun(REORDERED, { firstTick: 4, lastTick: 7 })).toEqual({ from: 4, to: 8 })
    expect(findExactRun(REORDERED, { firstTick: 0, lastTick: 7 })).toEqual({ from: 0, to: 8 })
  })

  it('refuses a start that is no key frame', () => {
    expect(findExactRun(REORDERED, { firstTick: 1, lastTick: 3 })).toBeUndefined()
  })

  it('refuses an end whose frames need a later one', () => {
    // Frames 1 and 2 lean on 3, which would have to be in the file.
    expect(findExactRun(REORDERED, { firstTick: 0, lastTick: 2 })).toBeUndefined()
  })

  it('takes any end where every frame leans on earlier ones alone', () => {
    expect(findExactRun(packets('0K', '1', '2', '3'), { firstTick: 0, lastTick: 2 })).toEqual({ from: 0, to: 3 })
  })

  it('refuses a key frame that is shown after others of its group', () => {
    expect(findExactRun(OPEN, { firstTick: 2, lastTick: 5 })).toBeUndefined()
    expect(findExactRun(OPEN, { firstTick: 4, lastTick: 5 })).toBeUndefined()
  })

  it('refuses two frames at one instant', () => {
    expect(findExactRun(packets('0K', '1', '1'), { firstTick: 0, lastTick: 1 })).toBeUndefined()
  })

  it('finds nothing in nothing', () => {
    expect(findExactRun([], { firstTick: 0, lastTick: 1 })).toBeUndefined()
  })
})

describe('findWholeRun', () => {
  it('begins with the key frame that the first frame shown needs, and ends with the last one shown', () => {
    expect(findWholeRun(packets('-3K', '-2', '-1K', '0', '1', '2'), [0, 1])).toEqual({ from: 2, to: 5 })
    expect(findWholeRun(REORDERED, [0, 1, 2, 3, 4, 5, 6, 7])).toEqual({ from: 0, to: 8 })
  })
})
