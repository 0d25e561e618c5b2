/** Rec. 709 weights of red, green and blue in brightness. */
const [RED, GREEN, BLUE] = [0.2126, 0.7152, 0.0722]

/** Brightness of each pixel, 0 to 255, from red, green, blue and alpha in turn. */
export function lumaOf(rgba: Uint8ClampedArray): Uint8Array {
  const luma = new Uint8Array(rgba.length / 4)
  for (let pixel = 0; pixel < luma.length; pixel++) {
    const at = pixel * 4
    luma[pixel] = RED * (rgba[at] ?? 0) + GREEN * (rgba[at + 1] ?? 0) + BLUE * (rgba[at + 2] ?? 0)
  }
  return luma
}

/** Mean brightness of a picture, 0 (black) to 1; 0 for no picture. */
export function meanLuma(luma: Uint8Array): number {
  return luma.length === 0 ? 0 : luma.reduce((sum, value) => sum + value, 0) / luma.length / 255
}

/** Changes up to this, of 255, are grain and compression. */
const GRAIN = 6

/** Mean change between two pictures of one size, 0 to 1, grain left out. */
export function meanChange(before: Uint8Array, after: Uint8Array): number {
  let sum = 0
  for (let pixel = 0; pixel < after.length; pixel++) {
    const change = Math.abs((after[pixel] ?? 0) - (before[pixel] ?? 0))
    if (change > GRAIN) sum += change - GRAIN
  }
  return after.length === 0 ? 0 : sum / after.length / 255
}
