import { describe, expect, it } from 'vitest'
import { cameraFor, project } from '#fakes/demo/film/camera'
import { FILM_CLIPS } from '#fakes/demo/film/clips'
import type { FilmClip, FilmClipName } from '#fakes/demo/film/clips'
import { headSpeedMps, measuredTruth } from '#fakes/demo/film/measured-truth'
import type { FaceOnTruth } from '#fakes/demo/film/measured-truth'
import { findPositions } from '#fakes/demo/film/positions'
import { BODY } from '#fakes/demo/film/skeleton'
import { smoothCurve } from '#fakes/demo/film/spline'
import { BALL_RADIUS_MM, CLUBS, POSITIONS } from '#fakes/demo/film/swing-kinds'
import type { SwingKind } from '#fakes/demo/film/swing-kinds'
import { addressPoint, leftOver, makeSwing, strikePoint } from '#fakes/demo/film/swing-model'
import { momentAt, timelineOf } from '#fakes/demo/film/timeline'
import { distance, length } from '#fakes/demo/film/vector'

const KINDS: SwingKind[] = [
  { release: 'sound', contact: 'solid', club: '7-iron', hands: 'right' },
  { release: 'early', contact: 'solid', club: '7-iron', hands: 'right' },
  { release: 'early', contact: 'fat', club: '7-iron', hands: 'right' },
  { release: 'early', contact: 'thin', club: '7-iron', hands: 'right' },
  { release: 'sound', contact: 'solid', club: 'driver', hands: 'right' },
]
const nameOf = (kind: SwingKind) => `${kind.club}, ${kind.release}, ${kind.contact}`

function clip(name: FilmClipName): FilmClip {
  const found = FILM_CLIPS.find(each => each.name === name)
  if (!found) throw new Error(`No clip ${name}.`)
  return found
}

function faceOn(name: FilmClipName, index = 0): FaceOnTruth {
  const truth = measuredTruth(clip(name))[index]?.faceOn
  if (!truth) throw new Error(`${name} is not filmed from the front.`)
  return truth
}

describe('a curve through knots', () => {
  const knots = [{ t: 0, value: 1 }, { t: 0.4, value: 5, rate: 12 }, { t: 0.7, value: 6 }, { t: 1, value: 2 }]
  const curve = smoothCurve(knots)

  it('passes through them and rests outside them', () => {
    for (const { t, value } of knots) expect(curve(t)).toBeCloseTo(value, 9)
    expect(curve(-3)).toBe(1)
    expect(curve(8)).toBe(2)
  })

  it('has the rate that a knot asks for', () => {
    expect((curve(0.4 + 1e-6) - curve(0.4 - 1e-6)) / 2e-6).toBeCloseTo(12, 4)
  })

  it('has no jump in its first two derivatives at a knot', () => {
    const h = 1e-4
    const bend = (t: number) => (curve(t + h) - 2 * curve(t) + curve(t - h)) / h ** 2
    for (const t of [0, 0.4, 0.7, 1]) expect(Math.abs(bend(t + 2 * h) - bend(t - 2 * h))).toBeLessThan(2)
  })

  it('refuses knots that do not rise', () => {
    expect(() => smoothCurve([{ t: 1, value: 0 }, { t: 1, value: 2 }, { t: 2, value: 3 }])).toThrow('rise')
  })
})

describe.each(KINDS.map(kind => [nameOf(kind), kind] as const))('the swing: %s', (_, kind) => {
  const swing = makeSwing(kind)
  const found = findPositions(swing)

  it('stands behind the ball at address and meets it at impact', () => {
    expect(distance(swing.skeletonAt(swing.startS - 1).clubHead, addressPoint(kind))).toBeLessThan(1e-6)
    expect(distance(swing.skeletonAt(0).clubHead, strikePoint(kind))).toBeLessThan(1e-6)
    expect(strikePoint(kind).x).toBeLessThan(-BALL_RADIUS_MM)
  })

  it('asks little of the body to make the club meet the ball: the keys fit the golfer', () => {
    for (const { shift } of leftOver(kind)) expect(length(shift)).toBeLessThan(60)
  })

  it('reaches every position once, in their order', () => {
    const times = POSITIONS.map(position => found[position])
    expect([...times].sort((a, b) => a - b)).toEqual(times)
    expect(new Set(times).size).toBe(POSITIONS.length)
  })

  it('has the tempo of a usual swing: about 3 to 1, 0.25 to 0.30 s down', () => {
    const down = found.impact - found.top
    expect(down).toBeGreaterThanOrEqual(0.25)
    expect(down).toBeLessThanOrEqual(0.3)
    expect((found.top - found.address) / down).toBeGreaterThan(2.5)
    expect((found.top - found.address) / down).toBeLessThan(3.5)
  })

  it('keeps bones as long as they are, through swing and finish', () => {
    for (let t = swing.startS; t <= swing.endS; t += 0.003) {
      for (const side of [swing.skeletonAt(t).lead, swing.skeletonAt(t).trail]) {
        expect(distance(side.shoulder, side.elbow)).toBeCloseTo(BODY.upperArm, 6)
        expect(distance(side.elbow, side.wrist)).toBeCloseTo(BODY.forearm, 6)
        expect(distance(side.hip, side.knee)).toBeCloseTo(BODY.thigh, 6)
        expect(distance(side.knee, side.ankle)).toBeCloseTo(BODY.shank, 6)
      }
      const { gripEnd, clubHead } = swing.skeletonAt(t)
      expect(distance(gripEnd, clubHead)).toBeCloseTo(CLUBS[kind.club].lengthMm, 6)
    }
  })

  it('has a straight lead arm and a bent trail arm at impact', () => {
    const { lead, trail } = swing.skeletonAt(0)
    const full = BODY.upperArm + BODY.forearm
    expect(distance(lead.shoulder, lead.wrist)).toBeGreaterThan(0.99 * full)
    expect(distance(trail.shoulder, trail.wrist)).toBeLessThan(distance(lead.shoulder, lead.wrist))
  })

  it('never drives the club deeper than a divot', () => {
    for (let t = swing.startS; t <= swing.endS; t += 0.0005) expect(swing.skeletonAt(t).clubHead.y).toBeGreaterThan(-18)
  })

  it('moves no joint by jumps: at 240 frames a second nothing leaps between frames', () => {
    for (let t = swing.startS; t < swing.endS; t += 1 / 240) {
      const [now, next] = [swing.skeletonAt(t), swing.skeletonAt(t + 1 / 240)]
      expect(distance(now.lead.elbow, next.lead.elbow)).toBeLessThan(60)
      expect(distance(now.trail.elbow, next.trail.elbow)).toBeLessThan(60)
      expect(distance(now.trail.knee, next.trail.knee)).toBeLessThan(25)
      expect(distance(now.head, next.head)).toBeLessThan(12)
    }
  })
})

describe('what tells a sound swing from an early release', () => {
  const sound = faceOn('right-sound-face-on')
  const early = faceOn('right-early-face-on')

  // Facts of the trade (common practice, no published source).
  it('has the plumb line from the grip end near the ball with the shaft level, clearly behind it when the wrists let go early', () => {
    expect(sound.gripEndOffsetCm).toBeGreaterThan(-12)
    expect(sound.gripEndOffsetCm).toBeLessThanOrEqual(0)
    expect(early.gripEndOffsetCm).toBeLessThan(sound.gripEndOffsetCm - 10)
  })

  it('leans the shaft toward the target at impact, and not at all or away in the early release', () => {
    expect(sound.shaftLeanDeg).toBeGreaterThan(0)
    expect(early.shaftLeanDeg).toBeLessThanOrEqual(0)
  })

  it('has the smaller angle from forearm to shaft in the early release', () => {
    expect(early.forearmToShaftDeg).toBeLessThan(sound.forearmToShaftDeg - 5)
    expect(early.forearmToShaftDeg).toBeGreaterThan(0)
  })

  it('has the grip end ahead of the ball in the last frame before contact; the early release about over it', () => {
    expect(sound.gripEndOffsetLastFrameCm).toBeGreaterThan(4)
    expect(Math.abs(early.gripEndOffsetLastFrameCm)).toBeLessThan(7)
  })

  it('has its lowest point ahead of the ball, the fat one behind it', () => {
    expect(sound.lowPointCm).toBeGreaterThan(2)
    expect(sound.lowPointCm).toBeLessThan(12)
    expect(faceOn('right-three-face-on', 1).lowPointCm).toBeLessThan(0)
  })

  it('brings the club at about 34 m/s, the early release slower', () => {
    const [soundMps, earlyMps] = [KINDS[0], KINDS[1]].map(kind => kind ? headSpeedMps(makeSwing(kind), -0.001) : 0)
    expect(soundMps).toBeGreaterThan(31)
    expect(soundMps).toBeLessThan(37)
    expect(earlyMps).toBeLessThan(soundMps ?? 0)
  })

  it('says the same of a left-hander as of a right-hander', () => {
    expect(faceOn('left-early-face-on')).toEqual(early)
  })

  it('meets the ground before the ball when fat and passes high over it when thin', () => {
    const [fat, thin] = [KINDS[2], KINDS[3]].map(kind => kind ? makeSwing(kind) : undefined)
    const firstBelow = [-0.006, -0.004, -0.002].some(t => (fat?.skeletonAt(t).clubHead.y ?? 0) < 0)
    expect(firstBelow).toBe(true)
    expect(thin?.skeletonAt(0).clubHead.y).toBeGreaterThan(10)
  })
})

describe('the clips', () => {
  it('has both views, both hands, both releases, both rates, one clip of three swings and one with a driver', () => {
    for (const view of ['face_on', 'down_the_line'])
      for (const hands of ['right', 'left'])
        expect(FILM_CLIPS.some(each => each.view === view && each.hands === hands), `${view} ${hands}`).toBe(true)
    for (const view of ['face_on', 'down_the_line'])
      for (const release of ['sound', 'early'])
        expect(FILM_CLIPS.some(each => each.view === view && each.swings.some(swing => swing.release === release)), `${view} ${release}`).toBe(true)
    expect(new Set(FILM_CLIPS.map(each => each.framesPerSecond))).toEqual(new Set([120, 240]))
    expect(FILM_CLIPS.filter(each => each.swings.length === 3)).toHaveLength(1)
    expect(FILM_CLIPS.filter(each => each.club === 'driver')).toHaveLength(1)
  })

  it.each(FILM_CLIPS.map(each => [each.name, each] as const))('keeps the club in the picture and the ball still until it is struck: %s', (_, each) => {
    const timeline = timelineOf(each)
    const first = momentAt(timeline, 0).ball
    const impactS = timeline.swings[0]?.impactS ?? 0
    for (let index = 0; index < timeline.frameCount; index++) {
      const clipS = index / each.framesPerSecond
      const moment = momentAt(timeline, clipS)
      const head = project(timeline.camera, moment.body.clubHead)
      expect(head.x).toBeGreaterThan(0)
      expect(head.x).toBeLessThan(720)
      expect(head.y).toBeGreaterThan(0)
      expect(head.y).toBeLessThan(1280)
      if (clipS <= impactS) expect(moment.ball).toEqual(first)
      else if (clipS < impactS + 0.01) expect(moment.ball).not.toEqual(first)
    }
  })

  it('sets the club behind the next ball without touching it', () => {
    const timeline = timelineOf(clip('right-three-face-on'))
    const [first, second] = timeline.swings
    if (!first || !second) throw new Error('There are not three swings.')
    let nearestMm = Infinity
    let hasBall = false
    for (let clipS = first.impactS + first.swing.endS; clipS < second.impactS + second.swing.startS; clipS += 0.004) {
      const { ball, body } = momentAt(timeline, clipS)
      hasBall ||= ball !== undefined
      if (ball) nearestMm = Math.min(nearestMm, distance(ball, body.clubHead))
    }
    expect(hasBall).toBe(true)
    // At address itself the marked point is that far from the middle of the ball.
    expect(nearestMm).toBeGreaterThan(distance(addressPoint(second.swing.kind), { x: 0, y: BALL_RADIUS_MM, z: 0 }) - 1)
  })

  it.each(FILM_CLIPS.filter(each => each.view === 'face_on').map(each => [each.name, each] as const))('shows shaft and arms level in the picture when they are level in space: %s', (_, each) => {
    const timeline = timelineOf(each)
    for (const { swing, impactS } of timeline.swings) {
      const found = findPositions(swing)
      const slopeAt = (seconds: number): number => {
        const { gripEnd, clubHead } = momentAt(timeline, impactS + seconds).body
        const [grip, head] = [project(timeline.camera, gripEnd), project(timeline.camera, clubHead)]
        return Math.abs(Math.atan2(head.y - grip.y, Math.abs(head.x - grip.x))) * 180 / Math.PI
      }
      expect(slopeAt(found.shaft_level_back)).toBeLessThan(1)
      expect(slopeAt(found.shaft_level_down)).toBeLessThan(1)
      expect(slopeAt(found.shaft_level_through)).toBeLessThan(3)
    }
  })
})

describe('the camera', () => {
  it('shows the target to the right of a right-hander and to the left of a left-hander, face-on', () => {
    const camera = cameraFor('face_on', '7-iron', 'right')
    expect(project(camera, { x: 500, y: 0, z: 0 }).x).toBeGreaterThan(360)
    const [right, left] = ['right-early-face-on', 'left-early-face-on'].map((name) => {
      const timeline = timelineOf(clip(name === 'left-early-face-on' ? 'left-early-face-on' : 'right-early-face-on'))
      return project(timeline.camera, momentAt(timeline, timeline.swings[0]?.impactS ?? 0).body.gripEnd)
    })
    expect(left?.x).toBeCloseTo(720 - (right?.x ?? 0), 6)
  })

  it('looks along the target line with the ball to the right of a right-hander', () => {
    const camera = cameraFor('down_the_line', '7-iron', 'right')
    const ball = project(camera, { x: 0, y: 21, z: 0 })
    const heels = project(camera, { x: 0, y: 0, z: -820 })
    expect(ball.x).toBeGreaterThan(heels.x)
    expect(ball.depthMm).toBeCloseTo(4500, 6)
    expect(() => project(camera, { x: -5000, y: 0, z: 0 })).toThrow('behind the lens')
  })

  it('keeps a known length on the ground: one metre at the ball', () => {
    const camera = cameraFor('face_on', '7-iron', 'right')
    const [from, to] = [project(camera, { x: 0, y: 0, z: 0 }), project(camera, { x: 1000, y: 0, z: 0 })]
    expect(to.x - from.x).toBeCloseTo(1000 / 2620 * 720, 6)
  })
})
