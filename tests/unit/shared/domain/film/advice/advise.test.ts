import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { adviseOnFilm } from '#shared/domain/film/advice/advise'
import type { AdvisedFilm, Advice, AdviceKey, FilmContext } from '#shared/domain/film/advice/context'
import { distanceWords, millimetreWords, orWords } from '#shared/domain/film/advice/number-words'
import { YARD_M } from '#shared/domain/film/advice/speed'
import { CLUBS } from '#shared/domain/review/clubs'

const film: AdvisedFilm = { framesPerSecond: 240, captureFramesPerSecond: undefined, widthPx: 1080, heightPx: 1920, durationMs: 3100 }
const context: FilmContext = { view: 'face_on', club: '7-iron', handedness: 'right' }

function find(key: AdviceKey, filmChange: Partial<AdvisedFilm> = {}, contextChange: Partial<FilmContext> = {}): Advice | undefined {
  return adviseOnFilm({ ...film, ...filmChange }, { ...context, ...contextChange }).find(advice => advice.key === key)
}

describe('head travel', () => {
  it('is fine at 240', () => {
    // 76 mph · 0.44704 / 240 = 14.2 cm.
    expect(find('head-travel')).toEqual({ key: 'head-travel', tone: 'good', words: 'The club head moves about 14 cm between frames: fine for impact.' })
  })

  it('is fine at what phones call 120', () => {
    expect(find('head-travel', { framesPerSecond: 119.88 })?.tone).toBe('good')
    expect(find('head-travel', { framesPerSecond: 118 })?.tone).toBe('improve')
  })

  it('uses the student\'s own carry', () => {
    // 185 yards / 1.85 = 100 mph; 44.704 / 240 = 18.6 cm.
    expect(find('head-travel', {}, { usualCarryM: 185 * YARD_M })?.words).toContain('about 19 cm')
  })

  it('says what is lost under 60, and never blocks', () => {
    // A driver at 90 mph: 40.2336 / 30 = 1.34 m.
    expect(find('head-travel', { framesPerSecond: 30 }, { club: 'driver' })).toEqual({
      key: 'head-travel',
      tone: 'improve',
      words: 'Your face-on clip is 30 frames a second. The club head moves 1.3 m between frames, so impact may not be visible.',
      whatToDo: 'Film again at 120 or more, which phones call slow motion, or send it as it is.',
    })
  })

  it('says between 60 and 120 what falls between frames, and face-on that the low point is lost under 100', () => {
    // 33.975 / 60 = 56.6 cm.
    expect(find('head-travel', { framesPerSecond: 60 })?.words).toBe('Your face-on clip is 60 frames a second. The club head moves 57 cm between frames, so impact may fall between two of them and the low point cannot be measured.')
    expect(find('head-travel', { framesPerSecond: 60 }, { view: 'down_the_line' })?.words).toBe('Your down-the-line clip is 60 frames a second. The club head moves 57 cm between frames, so impact may fall between two of them.')
    expect(find('head-travel', { framesPerSecond: 100 })?.words).not.toContain('low point')
  })

  it('is fine for a putt at 30: the head is slow', () => {
    expect(find('head-travel', { framesPerSecond: 30 }, { club: 'putter' })?.words).toBe('The club head moves about 6 cm between frames: fine for impact.')
  })

  it('names no distance for a club it does not know', () => {
    expect(find('head-travel', {}, { club: 'one-off chipper' })?.words).toBe('240 frames a second: fine for impact.')
    expect(find('head-travel', { framesPerSecond: 30 }, { club: 'one-off chipper' })?.words).toContain('moves far between frames')
  })

  it('counts real frames of stretched slow motion', () => {
    expect(find('head-travel', { framesPerSecond: 30, captureFramesPerSecond: 240 })?.words).toContain('about 14 cm')
    expect(find('slow-motion', { framesPerSecond: 30, captureFramesPerSecond: 240 })).toMatchObject({ tone: 'good', words: 'Slow motion, filmed at 240 frames a second: times are counted in real seconds.' })
  })

  it('is left out where no rate can be trusted', () => {
    expect(find('head-travel', { framesPerSecond: 30 }, { downswingFileS: 2.2 })).toBeUndefined()
    expect(find('head-travel', { framesPerSecond: 0 })).toBeUndefined()
  })
})

describe('slow motion', () => {
  it('is asked about when the file is silent, and settled by the answer', () => {
    expect(find('slow-motion', { framesPerSecond: 30 })).toMatchObject({ tone: 'ask', words: 'The file does not say whether this is slow motion.' })
    expect(find('slow-motion', { framesPerSecond: 30 }, { saidFramesPerSecond: 30 })).toBeUndefined()
    expect(find('slow-motion', { framesPerSecond: 30 }, { saidFramesPerSecond: 240 })?.tone).toBe('good')
    expect(find('slow-motion')).toBeUndefined()
  })

  it('names what would fit', () => {
    expect(find('slow-motion', { framesPerSecond: 30 }, { downswingFileS: 2.2 })).toMatchObject({
      words: 'The downswing lasts 2.20 seconds in this film; a full one takes 0.2 to 0.4.',
      whatToDo: 'Say at how many frames a second it was filmed; 240 would fit.',
    })
  })

  it('says how a rate contradicts the downswing', () => {
    expect(find('slow-motion', { framesPerSecond: 30, captureFramesPerSecond: 240 }, { downswingFileS: 0.28 })?.words)
      .toBe('Filmed at 240 frames a second, the downswing would last 0.04 seconds; a full one takes 0.2 to 0.4.')
  })

  it('asks of unclear rates and of time-lapse', () => {
    expect(find('slow-motion', { framesPerSecond: 30, captureFramesPerSecond: 60 })?.words).toContain('names 60 frames a second and plays at 30')
    expect(find('slow-motion', { framesPerSecond: 30, captureFramesPerSecond: 5 })?.words).toContain('time-lapse')
  })

  it('does not hold a putt to a full downswing', () => {
    expect(find('slow-motion', {}, { club: 'putter', downswingFileS: 0.9 })).toBeUndefined()
  })
})

describe('the picture', () => {
  it('has one good line', () => {
    expect(find('picture')).toEqual({ key: 'picture', tone: 'good', words: 'The picture is upright and large enough to mark: 1080 × 1920 pixels.' })
    expect(find('picture', { widthPx: 720, heightPx: 1280 })?.tone).toBe('good')
  })

  it('tells each thing that is not right instead', () => {
    const keys = adviseOnFilm({ ...film, widthPx: 848, heightPx: 480, isUpright: false }, context).map(({ key }) => key)
    expect(keys).toEqual(expect.arrayContaining(['landscape', 'low-resolution', 'not-upright']))
    expect(keys).not.toContain('picture')
    expect(find('low-resolution', { widthPx: 480, heightPx: 848 })?.words).toContain('480 pixels on its shorter side')
  })

  it('speaks of darkness only when brightness is known', () => {
    expect(find('dark')).toBeUndefined()
    expect(find('dark', { meanLuma: 0.45 })).toBeUndefined()
    // 33.975 m/s at 1/500 s: 6.8 cm.
    expect(find('dark', { meanLuma: 0.1 })?.words).toBe('The picture is dark. In little light a phone exposes each frame longer, and at 1/500 of a second the club head smears over 7 cm.')
    expect(find('dark', { meanLuma: 0.1 }, { club: 'one-off chipper' })?.words).toBe('The picture is dark. In little light a phone exposes each frame longer.')
  })

  it('asks about a mirrored film by the hand of the profile', () => {
    expect(find('mirrored')).toBeUndefined()
    expect(find('mirrored', { isLikelyMirrored: true })).toMatchObject({ tone: 'ask', words: expect.stringContaining('as a left-hander in this film, and your profile says you are a right-hander') })
    expect(find('mirrored', { isLikelyMirrored: true }, { handedness: 'left' })?.words).toContain('as a right-hander')
  })

  it('says when a whole swing hardly fits', () => {
    expect(find('too-short', { durationMs: 900 })?.words).toContain('0.9 seconds')
    // 4 s of film at an eighth are half a second.
    expect(find('too-short', { framesPerSecond: 30, captureFramesPerSecond: 240, durationMs: 4000 })?.words).toContain('0.5 seconds')
    expect(find('too-short', { durationMs: 1500 })).toBeUndefined()
  })
})

describe('millimetres a pixel', () => {
  it('says so when they are unknown', () => {
    expect(find('pixel-size')).toMatchObject({ tone: 'ask', words: 'How many millimetres a pixel covers is not known: a file does not hold it.' })
  })

  it('reads them from the club at address', () => {
    // A 7-iron of 0.9398 m at 62° shows 829.8 mm face-on; over 270 px: 3.07 mm.
    expect(find('pixel-size', {}, { clubSpanPx: 270 })).toMatchObject({ tone: 'good', words: 'A pixel covers about 3.1 mm where you stand: fine for measuring.' })
    // Down the line 939.8 mm: 3.48.
    expect(find('pixel-size', {}, { clubSpanPx: 270, view: 'down_the_line' })?.words).toContain('3.5 mm')
    expect(find('pixel-size', {}, { clubSpanPx: 270, view: 'down_the_line', clubBuild: { lengthM: 1.08, lieDeg: 62 } })?.words).toContain('4.0 mm')
  })

  it('says what a coarse picture does to the ball', () => {
    // 829.8 / 100 = 8.3 mm; a ball of 42.67 mm is 5 pixels across.
    expect(find('pixel-size', {}, { clubSpanPx: 100 })).toMatchObject({ tone: 'improve', words: 'A pixel covers about 8.3 mm where you stand, so the ball is about 5 pixels across.' })
    expect(find('pixel-size', {}, { clubSpanPx: 10 })?.words).toContain('83 mm where you stand, so the ball is about one pixel across')
  })

  it('warns face-on when the club leaves the picture', () => {
    // 829.8 / 450 · 1080 = 1.99 m wide, against 2 · (0.45 + 0.94) = 2.78.
    expect(find('too-close', {}, { clubSpanPx: 450 })?.words).toBe('The picture is about 2.0 m wide where you stand, so the club may leave it.')
    expect(find('too-close', {}, { clubSpanPx: 270 })).toBeUndefined()
    expect(find('too-close', {}, { clubSpanPx: 450, view: 'down_the_line' })).toBeUndefined()
  })

  it('is rough from the golfer\'s height', () => {
    // 1.7 · 0.9 m over 0.26 · 1920 px: 3.06 mm.
    expect(find('pixel-size', {}, { personShareOfHeight: 0.26 })?.words).toBe('A pixel covers roughly 3.1 mm where you stand: fine for measuring.')
  })
})

describe('any film', () => {
  const number = fc.oneof(fc.double(), fc.integer({ min: -10, max: 4000 }))
  const films = fc.record({
    framesPerSecond: number, captureFramesPerSecond: fc.option(number, { nil: undefined }), widthPx: number, heightPx: number, durationMs: number,
    meanLuma: number, isLikelyMirrored: fc.boolean(), isUpright: fc.boolean(),
  }, { requiredKeys: ['framesPerSecond', 'captureFramesPerSecond', 'widthPx', 'heightPx', 'durationMs'] })
  const contexts = fc.record({
    view: fc.constantFrom('face_on' as const, 'down_the_line' as const), club: fc.oneof(fc.constantFrom(...CLUBS), fc.string()), handedness: fc.constantFrom('right' as const, 'left' as const),
    usualCarryM: number, saidFramesPerSecond: number, downswingFileS: number, clubSpanPx: number, personShareOfHeight: number, personHeightM: number,
  }, { requiredKeys: ['view', 'club', 'handedness'] })

  it('is advised on in plain words, one advice of a kind, things to do first', () => {
    fc.assert(fc.property(films, contexts, (anyFilm, anyContext) => {
      const advice = adviseOnFilm(anyFilm, anyContext)
      expect(new Set(advice.map(({ key }) => key)).size).toBe(advice.length)
      const order = advice.map(({ tone }) => ['improve', 'ask', 'good'].indexOf(tone))
      expect(order).toEqual([...order].sort((a, b) => a - b))
      for (const { tone, words, whatToDo } of advice) {
        expect(words).not.toMatch(/NaN|undefined|Infinity|!/)
        expect(words.endsWith('.')).toBe(true)
        expect(words.split(/\.(?:\s|$)/).filter(Boolean).length).toBeLessThanOrEqual(2)
        expect(whatToDo === undefined).toBe(tone === 'good')
      }
    }), { numRuns: 1000 })
  })

  it('never gets worse with more frames a second', () => {
    fc.assert(fc.property(fc.constantFrom(...CLUBS), fc.integer({ min: 24, max: 500 }), fc.integer({ min: 0, max: 500 }), (club, rate, more) => {
      const isGood = (framesPerSecond: number): boolean => find('head-travel', { framesPerSecond }, { club })?.tone === 'good'
      expect(isGood(rate) && !isGood(rate + more)).toBe(false)
    }))
  })
})

describe('numbers in words', () => {
  it.each([[0.001, 'under 1 cm'], [0.142, '14 cm'], [0.994, '99 cm'], [0.996, '1.0 m'], [1.341, '1.3 m']])('%d m: %s', (distanceM, words) => {
    expect(distanceWords(distanceM)).toBe(words)
  })

  it.each([[[240], '240'], [[120, 240], '120 or 240'], [[120, 240, 480], '120, 240 or 480'], [[], '']])('%o: %s', (rates, words) => {
    expect(orWords(rates)).toBe(words)
  })

  it('gives small millimetres one decimal', () => {
    expect(millimetreWords(3.07)).toBe('3.1 mm')
    expect(millimetreWords(12.4)).toBe('12 mm')
  })
})
