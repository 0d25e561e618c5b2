/** A clip holds one to six swings; a minute is room for six with their addresses. */
export const FILM_MAX_DURATION_MS = 60_000

/** The store is paid by the byte and the coach downloads every one; a minute at 1080p and 240 frames a second fits. */
export const FILM_MAX_BYTES = 500 * 1024 * 1024

/** Under the 23.976 of cinema cameras, so that they pass, and over the 20 and 15 of phones in poor light. */
export const FILM_MIN_FRAMES_PER_SECOND = 23.5

/** More than any phone films in slow motion (960); bounds the tables a reader will believe. */
export const FILM_MAX_FRAMES_PER_SECOND = 1000

/** Frames in the longest film at the highest rate: no table of a film that is kept can hold more. */
export const FILM_MAX_FRAME_COUNT = (FILM_MAX_DURATION_MS / 1000) * FILM_MAX_FRAMES_PER_SECOND
