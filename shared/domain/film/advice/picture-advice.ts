import { apparentClubLengthM } from '#shared/domain/clubs/apparent-length'
import { findDefaultClubBuild } from '#shared/domain/clubs/defaults'
import { HANDER_WORDS } from '#shared/domain/clubs/handedness'
import type { AdvisedFilm, Advice, FilmContext } from './context'
import { distanceWords, millimetreWords } from './number-words'
import { findPictureScale } from './picture-scale'
import { estimateHeadSpeed } from './speed'
import { blurM } from './travel'

/** The size next under 1080p that cameras offer. Our choice. */
export const LOW_RESOLUTION_PX = 720

/**
 * Half of middle grey: a surface that reflects 18 % of the light is 0.461 in sRGB (1.055 · 0.18^(1/2.4) − 0.055), and
 * cameras expose a picture to about that. Half of it is our choice, no published source.
 */
export const DARK_BELOW_LUMA = 0.23

/** One exposure that any rate up to 500 frames a second allows, named only to show what darkness costs. */
const DIM_EXPOSURE_S = 1 / 500

/** Equipment Rules, part 4: at least 1.680 in. */
const BALL_DIAMETER_MM = 42.672

/**
 * A mark is placed to about two pixels. At 5 mm a pixel that is 10 mm, and the low point of one swing is then told to
 * about 8 mm at 240 frames a second (reference values, oracle B): more and its sign is in doubt.
 */
export const COARSE_MM_PER_PIXEL = 5

/** Beside the ball the hands are about this far off when the shaft is level, back and through. Ours, rough. */
const HANDS_ASIDE_M = 0.45

/** Orientation and size: one line when all is well, one for each thing that is not. */
export function adviseOnPicture(film: AdvisedFilm): Advice[] {
  const [widthPx, heightPx] = [Math.round(film.widthPx), Math.round(film.heightPx)]
  if (!(widthPx > 0) || !(heightPx > 0) || !Number.isFinite(widthPx * heightPx))
    return []
  const advice: Advice[] = []
  if (film.isUpright === false)
    advice.push({ key: 'not-upright', tone: 'improve', words: 'You lie on your side in this picture.', whatToDo: 'Turn the film upright on your phone and choose it again, or send it as it is: your coach can turn it.' })
  if (widthPx > heightPx)
    advice.push({ key: 'landscape', tone: 'improve', words: 'The picture is wider than it is high, so you are small in it.', whatToDo: 'Stand the phone upright and film again, or send it as it is.' })
  const shortSidePx = Math.min(widthPx, heightPx)
  if (shortSidePx < LOW_RESOLUTION_PX)
    advice.push({ key: 'low-resolution', tone: 'improve', words: `The picture has ${shortSidePx} pixels on its shorter side, so hands and club head are hard to mark.`, whatToDo: 'Films that came through a messenger are made smaller: choose the one your phone made, or film again at 1080p. Or send it as it is.' })
  if (advice.length > 0)
    return advice
  return [{ key: 'picture', tone: 'good', words: `The picture is upright and large enough to mark: ${widthPx} × ${heightPx} pixels.` }]
}

/** Only what brightness itself shows; how long a frame was exposed the file does not say. */
export function adviseOnLight(film: AdvisedFilm, context: FilmContext): Advice | undefined {
  const { meanLuma } = film
  if (meanLuma === undefined || !(meanLuma >= 0 && meanLuma < DARK_BELOW_LUMA))
    return undefined
  const speed = estimateHeadSpeed(context.club, context.usualCarryM)
  const smear = speed ? `, and at 1/500 of a second the club head smears over ${distanceWords(blurM(speed.speedMps, DIM_EXPOSURE_S))}` : ''
  return {
    key: 'dark',
    tone: 'improve',
    words: `The picture is dark. In little light a phone exposes each frame longer${smear}.`,
    whatToDo: 'Film in brighter light with the light behind the phone, or send it as it is.',
  }
}

/** A guess, so a question: a mirrored left-hander looks just like a right-hander. */
export function adviseOnMirror(film: AdvisedFilm, context: FilmContext): Advice | undefined {
  if (film.isLikelyMirrored !== true)
    return undefined
  const swings = HANDER_WORDS[context.handedness === 'right' ? 'left' : 'right']
  return {
    key: 'mirrored',
    tone: 'ask',
    words: `You swing as a ${swings} in this film, and your profile says you are a ${HANDER_WORDS[context.handedness]}. Selfie lenses mirror the picture.`,
    whatToDo: 'If it is mirrored, say so and it is turned round before anything is measured. Next time use the lens on the back.',
  }
}

/** How many millimetres a pixel covers, and whether the club stays in the picture. */
export function adviseOnScale(film: AdvisedFilm, context: FilmContext): Advice[] {
  const club = context.clubBuild ?? findDefaultClubBuild(context.club)
  const scale = findPictureScale({ ...context, heightPx: film.heightPx, club })
  if (scale.kind === 'unknown') {
    return [{
      key: 'pixel-size',
      tone: 'ask',
      words: 'How many millimetres a pixel covers is not known: a file does not hold it.',
      whatToDo: 'If a club lies along your toes in the picture, your coach reads it from that. Lay one there next time.',
    }]
  }
  const { millimetresPerPixel, from } = scale
  const about = from === 'club' ? 'about' : 'roughly'
  const covers = `A pixel covers ${about} ${millimetreWords(millimetresPerPixel)} where you stand`
  const isCoarse = millimetresPerPixel > COARSE_MM_PER_PIXEL
  const advice: Advice[] = [isCoarse
    ? { key: 'pixel-size', tone: 'improve', words: `${covers}, so the ball is ${about} ${acrossWords(millimetresPerPixel)} across.`, whatToDo: 'Stand the phone four to five big steps away, film at 1080p, or send it as it is.' }
    : { key: 'pixel-size', tone: 'good', words: `${covers}: fine for measuring.` }]
  const widthM = film.widthPx * millimetresPerPixel / 1000
  if (context.view === 'face_on' && club && widthM < 2 * (HANDS_ASIDE_M + apparentClubLengthM('down_the_line', club)))
    advice.push({ key: 'too-close', tone: 'improve', words: `The picture is ${about} ${distanceWords(widthM)} wide where you stand, so the club may leave it.`, whatToDo: 'Stand the phone four to five big steps away, or send it as it is.' })
  return advice
}

function acrossWords(millimetresPerPixel: number): string {
  const pixels = Math.max(1, Math.round(BALL_DIAMETER_MM / millimetresPerPixel))
  return pixels === 1 ? 'one pixel' : `${pixels} pixels`
}
