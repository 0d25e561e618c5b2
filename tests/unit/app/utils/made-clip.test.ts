import { describe, expect, it } from 'vitest'
import type { PreparedClip } from '~/film/prepare/prepared-clip'
import { madeFrom, wayOf } from '~/utils/made-clip'

const prepared: PreparedClip = {
  file: new File(['film'], 'swing.mp4', { type: 'video/mp4' }), way: 'cut-and-stripped', frames: 240, spans: [],
  swings: [[0, 1.0004], [1.0004, 2.5006]], captureFramesPerSecond: 240, keptAs: 'a.mp4', reason: undefined, setbacks: [],
}

describe('a clip as it leaves the device', () => {
  it('tells its swings in whole milliseconds that touch and do not overlap', () => {
    expect(madeFrom('face_on', prepared, undefined)).toMatchObject({
      preparedAs: 'cut', captureFramesPerSecond: 240, keptAs: 'a.mp4', spans: [{ fromMs: 0, toMs: 1000 }, { fromMs: 1000, toMs: 2501 }],
    })
  })

  it('believes the person before the tag', () => {
    expect(madeFrom('face_on', prepared, 120).captureFramesPerSecond).toBe(120)
  })

  it.each([['re_encoded', 're-encoded'], ['cut', 'cut-and-stripped'], ['remuxed', 'remuxed'], ['original', 'untouched']] as const)('%s was %s', (as, way) => {
    expect(wayOf(as)).toBe(way)
  })
})
