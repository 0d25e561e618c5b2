import { describe, expect, it } from 'vitest'
import { FILM_CLIPS } from '#fakes/demo/film/clips'
import { drawBackground, drawFrame } from '#fakes/demo/film/draw'
import { MARKS } from '#fakes/demo/film/marks'
import type { Brush } from '#fakes/demo/film/paint'
import { convexHull, shade } from '#fakes/demo/film/paint'
import { timelineOf } from '#fakes/demo/film/timeline'
import { QUANTUM, readTruth } from '#fakes/demo/film/truth-file'

interface Disc {
  x: number
  y: number
  radiusPx: number
}

/** A canvas that keeps the discs it is told to draw, which are the ends of limbs and club, and paints nothing. */
function recordingBrush(): { brush: Brush, discs: Disc[], filled: () => number } {
  const discs: Disc[] = []
  let filled = 0
  const gradient = { addColorStop: () => undefined }
  const brush: Brush = {
    beginPath: () => undefined, moveTo: () => undefined, lineTo: () => undefined, closePath: () => undefined,
    arc: (x, y, radiusPx) => { discs.push({ x, y, radiusPx }) },
    ellipse: () => undefined, fill: () => { filled++ }, stroke: () => undefined, fillRect: () => { filled++ },
    createLinearGradient: () => gradient, createRadialGradient: () => gradient,
    fillStyle: '', strokeStyle: '', lineWidth: 1, lineJoin: 'miter', lineCap: 'butt', globalAlpha: 1,
    save: () => undefined, restore: () => undefined,
  }
  return { brush, discs, filled: () => filled }
}

const ALLOWED_PX = 2

describe.each(FILM_CLIPS.map(clip => [clip.name, clip] as const))('the drawing of %s', (name, clip) => {
  const timeline = timelineOf(clip)
  const truth = readTruth(name)
  const place = (mark: typeof MARKS[number], index: number) => ({
    x: (truth.marks[mark].x[index] ?? -1) / QUANTUM * truth.widthPx,
    y: (truth.marks[mark].y[index] ?? -1) / QUANTUM * truth.heightPx,
  })

  it('puts the end of a limb, of the club or the ball within 2 px of every mark of the truth', () => {
    for (let index = 0; index < truth.ticks.length; index += 3) {
      const { brush, discs } = recordingBrush()
      drawFrame(brush, timeline, (truth.ticks[index] ?? 0) / truth.timescale)
      for (const mark of MARKS) {
        const at = place(mark, index)
        const isAway = mark === 'ball' && at.x === 0 && at.y === 0
        // Face-on the rear of the seat is on the far side of the body; nothing is drawn there.
        if (isAway || (mark === 'seatRear' && clip.view === 'face_on')) continue
        const distances = discs.map(disc => mark === 'seatRear'
          ? Math.abs(Math.hypot(disc.x - at.x, disc.y - at.y) - disc.radiusPx)
          : Math.hypot(disc.x - at.x, disc.y - at.y))
        expect(Math.min(...distances), `${mark}, frame ${index}`).toBeLessThan(ALLOWED_PX)
      }
    }
  })

  it('would not pass for another moment: near impact one frame moves the club by far more', () => {
    const impact = Math.floor((truth.swings[0]?.positionsS.impact ?? 0) * truth.framesPerSecond)
    const [own, next] = [place('clubHead', impact), place('clubHead', impact + 1)]
    const step = Math.hypot(next.x - own.x, next.y - own.y)
    expect(step).toBeGreaterThan(clip.view === 'face_on' ? 10 * ALLOWED_PX : ALLOWED_PX)
  })

  it('names the place of every mark that it drew', () => {
    const drawn = drawFrame(recordingBrush().brush, timeline, 0)
    expect(Object.keys(drawn).sort()).toEqual([...MARKS].sort())
  })

  it('has a background', () => {
    const { brush, filled } = recordingBrush()
    drawBackground(brush, timeline)
    expect(filled()).toBeGreaterThan(10)
  })
})

describe('painting', () => {
  it('finds the corners of the least convex polygon, whatever the order', () => {
    const square = [{ x: 0, y: 0 }, { x: 4, y: 4 }, { x: 2, y: 1 }, { x: 4, y: 0 }, { x: 0, y: 4 }, { x: 1, y: 3 }]
    const corners = convexHull(square)
    expect(corners).toHaveLength(4)
    expect(corners).toEqual(expect.arrayContaining([{ x: 0, y: 0 }, { x: 4, y: 0 }, { x: 4, y: 4 }, { x: 0, y: 4 }]))
  })

  it('lightens and darkens a colour', () => {
    expect(shade('#808080', 1)).toBe('rgb(255 255 255)')
    expect(shade('#808080', -0.5)).toBe('rgb(64 64 64)')
    expect(() => shade('red', 0.1)).toThrow('not a colour')
  })
})
