/** Marks are placed to 2 px where the shorter side is 1080; a larger film costs time and bytes and measures no better. */
export const LONGEST_SIDE_MAX_PX = 1920

export interface PictureSize {
  widthPx: number
  heightPx: number
}

/**
 * Size of the prepared picture: the upright one, made smaller where its longer side is over 1920, never larger. Even on
 * both sides, since H.264 stores colour for two by two pixels.
 *
 * @param size upright, square pixels, whole and above 0
 */
export function preparedSize({ widthPx, heightPx }: PictureSize): PictureSize {
  const scale = Math.min(1, LONGEST_SIDE_MAX_PX / Math.max(widthPx, heightPx))
  return { widthPx: toEven(widthPx * scale), heightPx: toEven(heightPx * scale) }
}

function toEven(px: number): number {
  return Math.max(2, Math.round(px / 2) * 2)
}
