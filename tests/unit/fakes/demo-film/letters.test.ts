import { describe, expect, it } from 'vitest'
import type { LetterDraft } from '#shared/types/reviews'
import { DEMO_CLIPS, FILM_CLIPS, madeClipPath } from '#fakes/demo/film/clips'
import { measuredTruth } from '#fakes/demo/film/measured-truth'
import * as letters from '#fakes/demo/letters'
import { figuresOf, unsupportedFigures } from './letter-figures'

/** All swings that the demo's students send. */
const swings = FILM_CLIPS.filter(clip => Object.values(DEMO_CLIPS.right).includes(madeClipPath(clip.name, 'mp4'))).flatMap(clip => measuredTruth(clip))

function saying(saw: string): LetterDraft {
  return { ...letters.HEAVY_LETTER, saw }
}

describe('what the demo\'s letters state', () => {
  it.each(Object.entries(letters))('states no figure that its film does not bear out: %s', (_, letter) => {
    expect(unsupportedFigures(letter, swings)).toEqual([])
  })

  it('finds figures, and tells a right one from a wrong one', () => {
    expect(figuresOf(saying('It hangs 24.5 cm behind, the shaft leans 7° and it takes 0.27 s, 3.0 to 1.'))).toHaveLength(4)
    expect(unsupportedFigures(saying('It hangs 24.5 cm behind, the solid one 7 cm.'), swings)).toEqual([])
    expect(unsupportedFigures(saying('The shaft leans 7°, coming down takes 0.27 s, 3.0 to 1.'), swings)).toEqual([])
    expect(unsupportedFigures(saying('It hangs 31 cm behind; the shaft leans 12 degrees.'), swings)).toEqual(['31 cm', '12 degrees'])
  })

  it('says of the heavy one and the solid one what the clip shows', () => {
    const [solid, fat] = swings.filter(swing => swing.faceOn)
    expect(letters.HEAVY_LETTER.saw).toContain('well behind the ball')
    expect(fat?.faceOn?.gripEndOffsetCm).toBeLessThan(-20)
    expect(letters.HEAVY_LETTER.saw).toContain('almost over the ball')
    expect(Math.abs(solid?.faceOn?.gripEndOffsetCm ?? 100)).toBeLessThan(10)
  })
})
