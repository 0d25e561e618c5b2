import type { Part } from './body-shapes'
import type { Skeleton } from './skeleton'
import type { ClubKind } from './swing-kinds'
import { CLUBS } from './swing-kinds'
import type { Vec3 } from './vector'
import { add, along, scale } from './vector'

const GRIP_MM = 265
const SHAFT_PIECES = 7

/** The club in pieces, since part of it may be before the body and part behind. */
export function clubParts(body: Skeleton, club: ClubKind): Part[] {
  const { lengthMm } = CLUBS[club]
  const gripTip = along(body.gripEnd, body.shaft, GRIP_MM)
  const grip: Part = { owner: 'club', material: 'grip', centre: along(body.gripEnd, body.shaft, GRIP_MM / 2), nearerMm: 0, shapes: [
    { kind: 'capsule', from: body.gripEnd, to: gripTip, fromMm: 14, toMm: 11, marks: { from: 'gripEnd' } },
  ] }
  const piece = (lengthMm - GRIP_MM) / SHAFT_PIECES
  const shaft = Array.from({ length: SHAFT_PIECES }, (_, index): Part => {
    const from = along(gripTip, body.shaft, piece * index)
    const to = along(gripTip, body.shaft, piece * (index + 1))
    return { owner: 'club', material: 'shaft', centre: along(from, body.shaft, piece / 2), nearerMm: 0, shapes: [
      { kind: 'capsule', from, to, fromMm: 7.5 - index * 0.4, toMm: 7.2 - index * 0.4, marks: index === SHAFT_PIECES - 1 ? { to: 'clubHead' } : undefined },
    ] }
  })
  return [grip, ...shaft, headPart(body, club)]
}

/** A club head in its own directions: from heel to toe along its sole, up its face, and where the face looks. */
function headPart(body: Skeleton, club: ClubKind): Part {
  const up = scale(body.shaft, -1)
  const slope = SOLE_SLOPE[club]
  const place = (toeMm: number, upMm: number, faceMm: number): Vec3 =>
    add(along(body.clubHead, body.clubToe, toeMm), add(scale(up, upMm - slope * toeMm), scale(body.clubFace, faceMm)))
  const points = club === 'driver' ? driverPoints(place) : ironPoints(place)
  return { owner: 'club', material: 'head', centre: place(30, 10, 0), nearerMm: 0, shapes: [{ kind: 'hull', points }] }
}

/** The sole lies level while the shaft leans toward the golfer. */
const SOLE_SLOPE: Readonly<Record<ClubKind, number>> = { '7-iron': 0.53, 'driver': 0.72 }

type Place = (toeMm: number, upMm: number, faceMm: number) => Vec3

/** A blade: the leading edge a little ahead of the shaft, the toe higher than the heel. */
function ironPoints(place: Place): Vec3[] {
  return [place(-12, 24, 2), place(-10, 3, 10), place(8, 0, 12), place(62, 0, 12), place(74, 14, 8), place(72, 50, -14), place(60, 54, -16), place(8, 30, -6), place(8, 0, -10), place(60, 0, -12)]
}

/** A wood: a rounded body behind the face. */
function driverPoints(place: Place): Vec3[] {
  const body = [0, 1, 2, 3, 4, 5, 6, 7, 8].map((step) => {
    const angle = Math.PI * step / 8
    return place(44 + 58 * Math.cos(angle), 30, 20 - 104 * Math.sin(angle))
  })
  return [...body, place(-10, 40, 20), place(60, 56, 18), place(98, 34, 20), place(-4, 2, 20), place(86, 2, 20), place(44, 58, -34), place(40, 4, -70)]
}
