import type { Part, Shape } from './body-shapes'
import { BELT, bodyParts, ring, SEAT, seatBalls, trunkAt } from './body-shapes'
import type { Camera, Pixel } from './camera'
import { project } from './camera'
import { clubParts } from './club-shapes'
import type { Mark } from './marks'
import type { Outfit } from './outfits'
import type { Brush } from './paint'
import { convexHull, roundLight, shade, traceCapsule, tracePolygon } from './paint'
import type { Frame, Skeleton } from './skeleton'
import type { ClubKind } from './swing-kinds'
import type { Vec3 } from './vector'
import { along, dot, subtract, unit } from './vector'

/** Where the drawing really put a mark. */
export type DrawnMarks = Partial<Record<Mark, Pixel>>

/** Draws body and club, far parts first, and says where each joint, end and edge came to lie. */
export function drawGolfer(brush: Brush, camera: Camera, body: Skeleton, club: ClubKind, outfit: Outfit): DrawnMarks {
  const drawn: DrawnMarks = {}
  const parts = [...bodyParts(body), ...clubParts(body, club)]
    .map(part => ({ part, depthMm: project(camera, part.centre).depthMm - part.nearerMm }))
    .sort((a, b) => b.depthMm - a.depthMm)
  for (const { part } of parts) {
    drawPart(brush, camera, part, outfit, drawn)
    if (part.material === 'shirt') drawShirtDetails(brush, camera, body, outfit)
    if (part.material === 'belt') drawBuckle(brush, camera, body, outfit)
  }
  drawn.seatRear = seatEdge(camera, body)
  return drawn
}

/** Shadow on level ground, cast away from the light: one flat shape, so that overlapping limbs do not darken it twice. */
export function drawShadow(brush: Brush, camera: Camera, body: Skeleton, club: ClubKind, light: Vec3): void {
  const onGround = (point: Vec3): Vec3 => along(point, light, point.y / -light.y)
  brush.save()
  brush.globalAlpha = 0.3
  brush.fillStyle = '#31432B'
  brush.beginPath()
  for (const part of [...bodyParts(body), ...clubParts(body, club)])
    for (const shape of part.shapes) tracePolygon(brush, convexHull(outline(shape).map(onGround).map(point => project(camera, point))))
  brush.fill()
  brush.restore()
}

const AROUND = [0, 1, 2, 3, 4, 5, 6, 7].map(step => ({ x: Math.cos(step * Math.PI / 4), z: Math.sin(step * Math.PI / 4) }))

function outline(shape: Shape): Vec3[] {
  if (shape.kind === 'hull') return shape.points
  return [[shape.from, shape.fromMm], [shape.to, shape.toMm]].flatMap(([at, mm]) => typeof at === 'object' && typeof mm === 'number'
    ? AROUND.map(side => ({ x: at.x + side.x * mm, y: Math.max(0, at.y), z: at.z + side.z * mm }))
    : [])
}

function drawPart(brush: Brush, camera: Camera, part: Part, outfit: Outfit, drawn: DrawnMarks): void {
  const colour = outfit[part.material]
  // A casing keeps an arm apart from a shirt of the same colour.
  brush.lineJoin = 'round'
  brush.strokeStyle = shade(colour, -0.3)
  brush.lineWidth = part.material === 'shaft' ? 1 : 1.2
  const [first] = part.shapes
  brush.beginPath()
  for (const shape of part.shapes) traceShape(brush, camera, shape, drawn)
  brush.stroke()
  if (first) brush.fillStyle = lightOn(brush, camera, part.shapes, colour)
  brush.fill()
}

function traceShape(brush: Brush, camera: Camera, shape: Shape, drawn: DrawnMarks): void {
  if (shape.kind === 'hull') return tracePolygon(brush, convexHull(shape.points.map(point => project(camera, point))))
  const [from, to] = [project(camera, shape.from), project(camera, shape.to)]
  traceCapsule(brush, from, shape.fromMm * from.pxPerMm, to, shape.toMm * to.pxPerMm)
  if (shape.marks?.from) drawn[shape.marks.from] = { x: from.x, y: from.y }
  if (shape.marks?.to) drawn[shape.marks.to] = { x: to.x, y: to.y }
}

function lightOn(brush: Brush, camera: Camera, shapes: readonly Shape[], colour: string): CanvasGradient {
  const [only] = shapes
  if (only?.kind === 'capsule' && shapes.length === 1) return limbLight(brush, camera, only, colour)
  const corners = shapes.flatMap(shape => outline(shape).map(point => project(camera, point)))
  const [left, right] = [Math.min(...corners.map(corner => corner.x)), Math.max(...corners.map(corner => corner.x))]
  const [top, bottom] = [Math.min(...corners.map(corner => corner.y)), Math.max(...corners.map(corner => corner.y))]
  return roundLight(brush, colour, { x: (left + right) / 2, y: (top + bottom) / 2 }, { x: -1, y: 0 }, (right - left) / 2)
}

function limbLight(brush: Brush, camera: Camera, limb: Extract<Shape, { kind: 'capsule' }>, colour: string): CanvasGradient {
  const [from, to] = [project(camera, limb.from), project(camera, limb.to)]
  const far = Math.hypot(to.x - from.x, to.y - from.y)
  const across = far < 1 ? { x: -1, y: 0 } : { x: -(to.y - from.y) / far, y: (to.x - from.x) / far }
  const radiusPx = Math.max(limb.fromMm * from.pxPerMm, limb.toMm * to.pxPerMm)
  return roundLight(brush, colour, { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 }, across, radiusPx)
}

/** What shows which way the chest faces: buttons in front, a seam across the back, the collar. */
function drawShirtDetails(brush: Brush, camera: Camera, body: Skeleton, outfit: Outfit): void {
  const { centre, frame } = trunkAt(body, 0.8)
  const toCamera = unit(subtract(camera.at, centre))
  const facing = dot(frame.front, toCamera)
  const place = (share: number, deepMm: number): Pixel => {
    const at = trunkAt(body, share)
    return project(camera, along(at.centre, at.frame.front, deepMm))
  }
  brush.save()
  brush.lineCap = 'round'
  if (facing > 0.12) {
    brush.strokeStyle = outfit.trim
    brush.globalAlpha = Math.min(1, facing * 1.6) * 0.85
    brush.lineWidth = 2.4
    strokeThrough(brush, [place(0.97, 60), place(0.86, 92), place(0.72, 115)])
    strokeRing(brush, camera, trunkAt(body, 0.985), 62, 58, toCamera)
  }
  if (facing < -0.12) {
    brush.strokeStyle = shade(outfit.shirt, -0.28)
    brush.globalAlpha = Math.min(1, -facing * 1.6)
    brush.lineWidth = 1.6
    strokeRing(brush, camera, trunkAt(body, 0.8), 163, 105, toCamera)
  }
  brush.restore()
}

/** The half of a ring around the trunk that the camera sees. */
function strokeRing(brush: Brush, camera: Camera, at: { centre: Vec3, frame: Frame }, wideMm: number, deepMm: number, toCamera: Vec3): void {
  const seen = ring(at.centre, at.frame, wideMm, deepMm).filter(point => dot(unit(subtract(point, at.centre)), toCamera) > 0.05)
  strokeThrough(brush, seen.map(point => project(camera, point)).sort((a, b) => a.x - b.x))
}

function strokeThrough(brush: Brush, points: readonly Pixel[]): void {
  brush.beginPath()
  points.forEach((point, index) => index === 0 ? brush.moveTo(point.x, point.y) : brush.lineTo(point.x, point.y))
  brush.stroke()
}

function drawBuckle(brush: Brush, camera: Camera, body: Skeleton, outfit: Outfit): void {
  const { centre, frame } = trunkAt(body, BELT.share - 0.035)
  const front = along(centre, frame.front, BELT.deepMm + 3)
  if (dot(frame.front, unit(subtract(camera.at, centre))) < 0.15) return
  const corners = [[-17, -13], [17, -13], [17, 13], [-17, 13]].map(([wide = 0, high = 0]) =>
    project(camera, along(along(front, frame.across, wide), frame.up, high)))
  brush.fillStyle = outfit.buckle
  brush.beginPath()
  tracePolygon(brush, corners)
  brush.fill()
}

/** Where the drawn outline of the seat reaches farthest back, in the picture's own left or right. */
function seatEdge(camera: Camera, body: Skeleton): Pixel {
  const rear = seatBalls(body).reduce((a, b) => a.z < b.z ? a : b)
  const middle = project(camera, rear)
  const back = project(camera, { ...rear, z: rear.z - SEAT.radiusMm })
  const far = Math.hypot(back.x - middle.x, back.y - middle.y)
  // Face-on the rear lies behind the ball's middle; from the side it lies on the circle drawn.
  if (camera.view === 'face_on' || far === 0) return { x: back.x, y: back.y }
  const radiusPx = SEAT.radiusMm * middle.pxPerMm
  return { x: middle.x + (back.x - middle.x) / far * radiusPx, y: middle.y + (back.y - middle.y) / far * radiusPx }
}
