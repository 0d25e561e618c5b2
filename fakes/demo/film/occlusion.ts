import type { Capsule, Hull, Part } from './body-shapes'
import { bodyParts } from './body-shapes'
import type { Camera, Pixel, Projected } from './camera'
import { project } from './camera'
import { clubParts } from './club-shapes'
import type { Mark } from './marks'
import { convexHull } from './paint'
import type { Skeleton } from './skeleton'
import type { ClubKind } from './swing-kinds'
import type { Vec3 } from './vector'

/** Parts that a joint lies in or on: they do not hide it, though the joint itself is inside them. */
const OWNERS: Readonly<Record<Mark, readonly string[]>> = {
  ball: [], gripEnd: ['club'], clubHead: ['club'], neckBase: ['head', 'trunk'], head: ['head'],
  leadShoulder: ['lead arm'], leadElbow: ['lead arm'], leadWrist: ['lead arm', 'club'],
  leadHip: ['lead leg', 'trunk'], leadKnee: ['lead leg'], leadHeel: ['lead leg'], leadToe: ['lead leg'],
  trailShoulder: ['trail arm'], trailElbow: ['trail arm'], trailWrist: ['trail arm', 'club'],
  trailHip: ['trail leg', 'trunk'], trailKnee: ['trail leg'], trailHeel: ['trail leg'], trailToe: ['trail leg'],
  seatRear: ['trunk'],
}

/** A part must be nearer than the mark by this much to hide it: hands overlap, and neither covers the other's wrist. */
const NEARER_MM = 45

/** What of the golfer can hide marks at a moment, as the camera sees it. */
export interface Occluders {
  camera: Camera
  shapes: Array<{ owner: string, covers: (at: Projected) => boolean }>
}

export function occludersOf(camera: Camera, body: Skeleton, club: ClubKind): Occluders {
  const shapes = [...bodyParts(body), ...clubParts(body, club)].flatMap(part => part.shapes.map(shape => ({
    owner: part.owner,
    covers: shape.kind === 'capsule' ? coveredByCapsule(camera, shape) : coveredByHull(camera, part, shape),
  })))
  return { camera, shapes }
}

/** True when something that the mark does not belong to lies between it and the lens. */
export function isHidden(occluders: Occluders, mark: Mark, point: Vec3): boolean {
  // The rear of the seat faces away from whoever films from the front.
  if (mark === 'seatRear' && occluders.camera.view === 'face_on') return true
  const at = project(occluders.camera, point)
  return occluders.shapes.some(shape => !OWNERS[mark].includes(shape.owner) && shape.covers(at))
}

function coveredByCapsule(camera: Camera, capsule: Capsule): (at: Projected) => boolean {
  const [from, to] = [project(camera, capsule.from), project(camera, capsule.to)]
  return (at) => {
    const share = nearestShare(at, from, to)
    const [x, y] = [from.x + (to.x - from.x) * share, from.y + (to.y - from.y) * share]
    const radiusMm = capsule.fromMm + (capsule.toMm - capsule.fromMm) * share
    const pxPerMm = from.pxPerMm + (to.pxPerMm - from.pxPerMm) * share
    const depthMm = from.depthMm + (to.depthMm - from.depthMm) * share
    return depthMm < at.depthMm - NEARER_MM && Math.hypot(at.x - x, at.y - y) < radiusMm * pxPerMm
  }
}

function nearestShare(at: Pixel, from: Pixel, to: Pixel): number {
  const [dx, dy] = [to.x - from.x, to.y - from.y]
  const squared = dx * dx + dy * dy
  return squared === 0 ? 0 : Math.min(1, Math.max(0, ((at.x - from.x) * dx + (at.y - from.y) * dy) / squared))
}

function coveredByHull(camera: Camera, part: Part, hull: Hull): (at: Projected) => boolean {
  const corners = convexHull(hull.points.map(point => project(camera, point)))
  const { depthMm } = project(camera, part.centre)
  return at => depthMm < at.depthMm - NEARER_MM && isInside(corners, at)
}

/** Inside a convex polygon whose corners run one way round. */
function isInside(corners: readonly Pixel[], at: Pixel): boolean {
  return corners.every((corner, index) => {
    const next = corners[(index + 1) % corners.length] ?? corner
    return (next.x - corner.x) * (at.y - corner.y) - (next.y - corner.y) * (at.x - corner.x) >= 0
  })
}
