import { readFileSync, statSync } from 'node:fs'
import { BufferSource, EncodedPacketSink, Input, MP4 } from 'mediabunny'
import { describe, expect, it } from 'vitest'
import { DEMO_CLIPS, FILM_CLIPS, madeClipPath } from '#fakes/demo/film/clips'
import { MARKS } from '#fakes/demo/film/marks'
import { POSITIONS } from '#fakes/demo/film/swing-kinds'
import { timelineOf } from '#fakes/demo/film/timeline'
import { makeTruth, marksAt } from '#fakes/demo/film/truth'
import { QUANTUM, readTruth } from '#fakes/demo/film/truth-file'
import { examineFilm } from '#server/features/film/reading/examine-film'
import { RangeReader } from '#server/features/film/reading/range-reader'
import { startRangeServer } from '#tests/support/film/range-server'

const MB = 1024 * 1024

async function readMp4(path: string) {
  const input = new Input({ source: new BufferSource(readFileSync(path)), formats: [MP4] })
  const track = await input.getPrimaryVideoTrack()
  if (!track) throw new Error(`${path} holds no picture.`)
  const packets: Array<{ seconds: number, isKey: boolean }> = []
  for await (const packet of new EncodedPacketSink(track).packets(undefined, undefined, { metadataOnly: true }))
    packets.push({ seconds: packet.timestamp, isKey: packet.type === 'key' })
  packets.sort((a, b) => a.seconds - b.seconds)
  return {
    packets,
    codec: await track.getCodec(),
    timescale: await track.getTimeResolution(),
    rotation: await track.getRotation(),
    size: [await track.getDisplayWidth(), await track.getDisplayHeight()],
    tracks: (await input.getTracks()).length,
    audio: await input.getPrimaryAudioTrack(),
    tags: await input.getMetadataTags(),
  }
}

it('holds all clips in less than 8 MB and their truth in less than 3 MB', () => {
  const bytes = (kind: 'mp4' | 'json') => FILM_CLIPS.reduce((sum, clip) => sum + statSync(madeClipPath(clip.name, kind)).size, 0)
  expect(bytes('mp4')).toBeLessThan(8 * MB)
  expect(bytes('json')).toBeLessThan(3 * MB)
})

it('gives the demo a clip of each view', () => {
  for (const clips of Object.values(DEMO_CLIPS)) {
    for (const view of ['face_on', 'down_the_line'] as const) {
      expect(FILM_CLIPS.find(clip => madeClipPath(clip.name, 'mp4') === clips[view])?.view).toBe(view)
    }
  }
})

describe.each(FILM_CLIPS.map(clip => [clip.name, clip] as const))('%s', (name, clip) => {
  const truth = readTruth(name)

  it('is an upright H.264 film without sound, tags or rotation', async () => {
    const film = await readMp4(madeClipPath(name, 'mp4'))
    expect(film).toMatchObject({ codec: 'avc', rotation: 0, size: [720, 1280], tracks: 1, audio: null })
    expect(Object.keys(film.tags).filter(key => key !== 'raw')).toEqual([])
  })

  it('has a frame at every time that its truth states, and no other', async () => {
    const film = await readMp4(madeClipPath(name, 'mp4'))
    expect(film.timescale).toBe(truth.timescale)
    expect(film.packets.map(packet => Math.round(packet.seconds * film.timescale))).toEqual(truth.ticks)
    expect(truth.ticks[1]).toBe(truth.timescale / clip.framesPerSecond)
    expect(truth.seconds).toEqual(truth.ticks.map(tick => Number((tick / truth.timescale).toFixed(6))))
  })

  it('has a key frame at least every tenth of a second', async () => {
    const film = await readMp4(madeClipPath(name, 'mp4'))
    const keys = film.packets.filter(packet => packet.isKey).map(packet => packet.seconds)
    expect(keys[0]).toBe(0)
    const ends = [...keys.slice(1), film.packets.at(-1)?.seconds ?? 0]
    for (const [index, from] of keys.entries()) expect((ends[index] ?? 0) - from).toBeLessThan(0.1 + 1e-4)
  })

  it('was drawn within 2 px of its truth', () => {
    expect(truth.drawnWithinPx).toBeLessThan(2)
    // Zero would mean that nothing was compared: the truth is kept in whole hundred-thousandths.
    expect(truth.drawnWithinPx).toBeGreaterThan(0)
  })

  it('keeps the truth that model and camera give today', () => {
    const timeline = timelineOf(clip)
    expect(truth.ticks).toHaveLength(timeline.frameCount)
    for (let index = 0; index < timeline.frameCount; index += 7) {
      const marks = marksAt(timeline, index / clip.framesPerSecond)
      for (const mark of MARKS) {
        const { x, y, hidden } = truth.marks[mark]
        expect(Math.abs((x[index] ?? -1) / QUANTUM * 720 - marks[mark].at.x), `${mark} x, frame ${index}`).toBeLessThan(0.01)
        expect(Math.abs((y[index] ?? -1) / QUANTUM * 1280 - marks[mark].at.y), `${mark} y, frame ${index}`).toBeLessThan(0.01)
        expect(hidden.some(([from, to]) => index >= from && index < to), `${mark} hidden, frame ${index}`).toBe(marks[mark].isHidden)
      }
    }
    const { drawnWithinPx, ...kept } = truth
    const { marks: _keptMarks, ...keptRest } = kept
    const { marks: _freshMarks, ...freshRest } = makeTruth(timeline)
    expect(drawnWithinPx).toBeTypeOf('number')
    expect(keptRest).toEqual(freshRest)
  })

  it('has every mark in every frame and every position of every swing in its order', () => {
    for (const mark of MARKS) {
      expect(truth.marks[mark].x).toHaveLength(truth.ticks.length)
      expect(truth.marks[mark].y).toHaveLength(truth.ticks.length)
    }
    expect(truth.swings).toHaveLength(clip.swings.length)
    const times = truth.swings.flatMap(swing => POSITIONS.map(position => swing.positionsS[position]))
    expect([...times].sort((a, b) => a - b)).toEqual(times)
    expect(times.at(-1)).toBeLessThan(truth.seconds.at(-1) ?? 0)
  })

  it('is accepted by the server\'s own reading of film', async () => {
    const bytes = readFileSync(madeClipPath(name, 'mp4'))
    const store = await startRangeServer()
    const reading = await examineFilm(new RangeReader({ url: store.put(name, bytes), bytes: bytes.length })).finally(() => store.close())
    expect(reading).toMatchObject({ kind: 'accepted', film: { frameCount: truth.ticks.length } })
  })

  it('hides what the golfer covers', () => {
    const isHidden = (mark: typeof MARKS[number]) => truth.marks[mark].hidden.some(([from, to]) => from <= 0 && to > 0)
    expect(isHidden('seatRear')).toBe(clip.view === 'face_on')
    expect(isHidden('leadHeel')).toBe(clip.view === 'down_the_line')
    expect(isHidden('leadShoulder')).toBe(clip.view === 'down_the_line')
    for (const mark of ['head', 'trailShoulder', 'trailKnee', 'trailToe', 'clubHead'] as const) expect(isHidden(mark), mark).toBe(false)
  })

  it('shows the strike, and lets impact fall between two frames', () => {
    for (const { positionsS } of truth.swings) {
      const before = Math.floor(positionsS.impact * clip.framesPerSecond)
      // Down the line the club head comes between lens and ball, as on real film.
      for (const mark of clip.view === 'face_on' ? ['ball', 'clubHead'] as const : ['clubHead'] as const)
        expect(truth.marks[mark].hidden.some(([from, to]) => before >= from && before < to), mark).toBe(false)
      expect(positionsS.impact * clip.framesPerSecond - before).toBeCloseTo(0.37, 2)
    }
  })
})
