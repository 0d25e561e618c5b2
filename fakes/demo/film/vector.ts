/** A point or direction in millimetres: x toward the target, y up, z from the golfer toward the ball and past it. */
export interface Vec3 {
  x: number
  y: number
  z: number
}

export function vec(x: number, y: number, z: number): Vec3 {
  return { x, y, z }
}

export function add(a: Vec3, b: Vec3): Vec3 {
  return { x: a.x + b.x, y: a.y + b.y, z: a.z + b.z }
}

export function subtract(a: Vec3, b: Vec3): Vec3 {
  return { x: a.x - b.x, y: a.y - b.y, z: a.z - b.z }
}

export function scale(a: Vec3, factor: number): Vec3 {
  return { x: a.x * factor, y: a.y * factor, z: a.z * factor }
}

/** `from` moved along `direction` by `mm`. */
export function along(from: Vec3, direction: Vec3, mm: number): Vec3 {
  return add(from, scale(direction, mm))
}

export function dot(a: Vec3, b: Vec3): number {
  return a.x * b.x + a.y * b.y + a.z * b.z
}

export function cross(a: Vec3, b: Vec3): Vec3 {
  return { x: a.y * b.z - a.z * b.y, y: a.z * b.x - a.x * b.z, z: a.x * b.y - a.y * b.x }
}

export function length(a: Vec3): number {
  return Math.hypot(a.x, a.y, a.z)
}

export function distance(a: Vec3, b: Vec3): number {
  return length(subtract(a, b))
}

/** @throws on a vector without direction: a pose that makes one is wrong, and a silent zero would draw a limb of no length. */
export function unit(a: Vec3): Vec3 {
  const mm = length(a)
  if (mm === 0) throw new Error('A vector of no length has no direction.')
  return scale(a, 1 / mm)
}

/** What of `a` is square to the unit vector `axis`, as a unit vector. */
export function squareTo(a: Vec3, axis: Vec3): Vec3 {
  return unit(subtract(a, scale(axis, dot(a, axis))))
}

export function mix(a: Vec3, b: Vec3, share: number): Vec3 {
  return add(scale(a, 1 - share), scale(b, share))
}

/** `a` turned about the unit vector `axis` by the right-hand rule (Rodrigues). */
export function turnAbout(a: Vec3, axis: Vec3, deg: number): Vec3 {
  const rad = radians(deg)
  const turned = add(scale(a, Math.cos(rad)), scale(cross(axis, a), Math.sin(rad)))
  return add(turned, scale(axis, dot(axis, a) * (1 - Math.cos(rad))))
}

/** The same point for a golfer who stands the other way round: the target lies toward -x. */
export function mirrored(a: Vec3): Vec3 {
  return { x: -a.x, y: a.y, z: a.z }
}

export function radians(deg: number): number {
  return deg * Math.PI / 180
}

export function degrees(rad: number): number {
  return rad * 180 / Math.PI
}
