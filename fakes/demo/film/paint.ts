import type { Pixel } from './camera'

/** What this drawing needs of a canvas; both kinds of canvas have it. */
export type Brush = Pick<
  CanvasRenderingContext2D,
  'beginPath' | 'moveTo' | 'lineTo' | 'arc' | 'ellipse' | 'closePath' | 'fill' | 'stroke' | 'fillRect' | 'createLinearGradient' | 'createRadialGradient' | 'fillStyle' | 'strokeStyle' | 'lineWidth' | 'lineJoin' | 'lineCap' | 'globalAlpha' | 'save' | 'restore'
>

/** Light comes from the upper left of the picture. */
const LIGHT = { x: -0.78, y: -0.62 }

/** `hex` lightened (share > 0) or darkened (share < 0), as a CSS colour. @throws unless it is written as #rrggbb. */
export function shade(hex: string, share: number): string {
  if (!/^#[0-9a-f]{6}$/i.test(hex)) throw new Error(`${hex} is not a colour like #1b4b8f.`)
  const target = share > 0 ? 255 : 0
  const mixed = [1, 3, 5].map((at) => {
    const value = Number.parseInt(hex.slice(at, at + 2), 16)
    return Math.round(value + (target - value) * Math.abs(share))
  })
  return `rgb(${mixed.join(' ')})`
}

/** Soft light over a round body whose middle lies at `middle`, `radiusPx` wide to each side along `across` (a unit direction). */
export function roundLight(brush: Brush, colour: string, middle: Pixel, across: Pixel, radiusPx: number): CanvasGradient {
  const towardLight = across.x * LIGHT.x + across.y * LIGHT.y
  const sign = towardLight < 0 ? -1 : 1
  // A body lying along the light shows little of it: without this the lit side would jump as a limb passes that angle.
  const strength = 0.35 + 0.65 * Math.abs(towardLight)
  const lit = { x: middle.x + across.x * radiusPx * sign, y: middle.y + across.y * radiusPx * sign }
  const dark = { x: middle.x - across.x * radiusPx * sign, y: middle.y - across.y * radiusPx * sign }
  const light = brush.createLinearGradient(lit.x, lit.y, dark.x, dark.y)
  light.addColorStop(0, shade(colour, 0.1 * strength))
  light.addColorStop(0.3, shade(colour, 0.16 * strength))
  light.addColorStop(0.6, colour)
  light.addColorStop(1, shade(colour, -0.3 * strength))
  return light
}

/** Corners of the least convex polygon around points, in order (Andrew's monotone chain). */
export function convexHull(points: readonly Pixel[]): Pixel[] {
  const sorted = [...points].sort((a, b) => a.x - b.x || a.y - b.y)
  const half = (ordered: readonly Pixel[]): Pixel[] => {
    const chain: Pixel[] = []
    for (const point of ordered) {
      while (chain.length >= 2 && turn(chain.at(-2), chain.at(-1), point) <= 0) chain.pop()
      chain.push(point)
    }
    return chain.slice(0, -1)
  }
  return [...half(sorted), ...half(sorted.reverse())]
}

function turn(a: Pixel | undefined, b: Pixel | undefined, c: Pixel): number {
  return a && b ? (b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x) : 1
}

/** Adds a polygon to the current path. */
export function tracePolygon(brush: Brush, corners: readonly Pixel[]): void {
  corners.forEach((corner, index) => index === 0 ? brush.moveTo(corner.x, corner.y) : brush.lineTo(corner.x, corner.y))
  brush.closePath()
}

/** Adds the outline of two discs and the band between them to the current path. */
export function traceCapsule(brush: Brush, from: Pixel, fromPx: number, to: Pixel, toPx: number): void {
  const far = Math.hypot(to.x - from.x, to.y - from.y)
  if (far <= Math.abs(fromPx - toPx) + 0.01) {
    // One disc covers the other: a limb that points at the lens.
    for (const [centre, radius] of [[from, fromPx], [to, toPx]] as const) {
      brush.moveTo(centre.x + radius, centre.y)
      brush.arc(centre.x, centre.y, radius, 0, 2 * Math.PI)
    }
    return
  }
  const along = Math.atan2(to.y - from.y, to.x - from.x)
  const lean = Math.acos((fromPx - toPx) / far)
  brush.moveTo(from.x + fromPx * Math.cos(along + lean), from.y + fromPx * Math.sin(along + lean))
  brush.arc(from.x, from.y, fromPx, along + lean, along - lean + 2 * Math.PI)
  brush.arc(to.x, to.y, toPx, along - lean, along + lean)
  brush.closePath()
}
