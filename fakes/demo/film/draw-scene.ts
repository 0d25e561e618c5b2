import type { Camera, Pixel } from './camera'
import { HEIGHT_PX, project, WIDTH_PX } from './camera'
import type { Brush } from './paint'
import { tracePolygon } from './paint'
import { groundFor } from './scene'
import type { Hands } from './swing-kinds'
import type { Vec3 } from './vector'
import { vec } from './vector'

const HORIZON_PX = HEIGHT_PX / 2
const SKY = ['#B9CDD6', '#D3DDDC', '#EAE6D6'] as const
const GRASS = ['#93A87C', '#7F9868', '#6B8553'] as const

/** The range behind the golfer: sky, hills, trees, a mown fairway, a flag. Drawn once a clip, since the camera stands still. */
export function drawScene(brush: Brush, camera: Camera, hands: Hands): void {
  const { flag, sticks } = groundFor(camera.view, hands)
  const sky = brush.createLinearGradient(0, 0, 0, HORIZON_PX)
  SKY.forEach((colour, index) => sky.addColorStop(index / 2, colour))
  brush.fillStyle = sky
  brush.fillRect(0, 0, WIDTH_PX, HORIZON_PX + 2)
  drawHills(brush)
  const grass = brush.createLinearGradient(0, HORIZON_PX, 0, HEIGHT_PX)
  GRASS.forEach((colour, index) => grass.addColorStop(index / 2, colour))
  brush.fillStyle = grass
  brush.fillRect(0, HORIZON_PX, WIDTH_PX, HEIGHT_PX - HORIZON_PX)
  drawMowing(brush, camera)
  drawFlag(brush, camera, flag)
  for (const stick of sticks) drawStick(brush, camera, stick.from, stick.to)
}

function drawHills(brush: Brush): void {
  wave(brush, '#A9BBB0', 34, 96, 1.7, 0.4)
  wave(brush, '#8FA692', 20, 62, 2.6, 2.1)
  // A row of trees: round heads, a little irregular.
  brush.fillStyle = '#6F8A70'
  brush.beginPath()
  for (let index = 0; index < 26; index++) {
    const x = index * 29 + 9 * Math.sin(index * 5.1)
    const radius = 15 + 7 * Math.sin(index * 2.3) ** 2
    brush.moveTo(x + radius * 1.15, HORIZON_PX - radius * 0.7)
    brush.ellipse(x, HORIZON_PX - radius * 0.7, radius * 1.15, radius, 0, 0, 2 * Math.PI)
  }
  brush.fill()
  brush.fillRect(0, HORIZON_PX - 9, WIDTH_PX, 10)
}

function wave(brush: Brush, colour: string, heightPx: number, abovePx: number, waves: number, phase: number): void {
  brush.fillStyle = colour
  brush.beginPath()
  brush.moveTo(0, HORIZON_PX)
  for (let x = 0; x <= WIDTH_PX; x += 12) brush.lineTo(x, HORIZON_PX - abovePx + heightPx * Math.sin(waves * 2 * Math.PI * x / WIDTH_PX + phase))
  brush.lineTo(WIDTH_PX, HORIZON_PX)
  brush.closePath()
  brush.fill()
}

const STRIPE_MM = 2400

/** Stripes of a mower along the target line, and the strip of shorter grass the golfer stands on. */
function drawMowing(brush: Brush, camera: Camera): void {
  brush.save()
  brush.globalAlpha = 0.11
  brush.fillStyle = '#F0F4D8'
  for (let stripe = -9; stripe <= 9; stripe += 2) {
    brush.beginPath()
    tracePolygon(brush, camera.view === 'face_on' ? acrossView(camera, stripe) : alongView(camera, stripe))
    brush.fill()
  }
  brush.restore()
}

/** A stripe that runs along the target line, seen from the side: level bands that thin out toward the horizon. */
function acrossView(camera: Camera, stripe: number): Pixel[] {
  const [near, far] = [-stripe * STRIPE_MM, -(stripe + 1) * STRIPE_MM].map(z => Math.min(z, camera.at.z - 1200))
  const left = (z = 0): Pixel => ({ x: 0, y: project(camera, vec(0, 0, z)).y })
  const right = (z = 0): Pixel => ({ x: WIDTH_PX, y: project(camera, vec(0, 0, z)).y })
  return [left(near), right(near), right(far), left(far)]
}

/** The same stripe seen along the line: a wedge that runs to the vanishing point. */
function alongView(camera: Camera, stripe: number): Pixel[] {
  const at = (z: number, farMm: number): Pixel => project(camera, vec(camera.at.x + camera.forward.x * farMm, 0, z))
  const [from, to] = [stripe * STRIPE_MM / 2.4, (stripe + 1) * STRIPE_MM / 2.4]
  return [at(from, 1200), at(to, 1200), at(to, 260_000), at(from, 260_000)]
}

function drawFlag(brush: Brush, camera: Camera, flag: { foot: Vec3, top: Vec3 }): void {
  const [foot, top] = [project(camera, flag.foot), project(camera, flag.top)]
  brush.lineCap = 'butt'
  brush.lineWidth = 2.2
  brush.strokeStyle = '#F6F4EA'
  brush.beginPath()
  brush.moveTo(foot.x, foot.y)
  brush.lineTo(top.x, top.y)
  brush.stroke()
  brush.fillStyle = '#C01F3F'
  brush.beginPath()
  tracePolygon(brush, [top, { x: top.x + 21, y: top.y + 6 }, { x: top.x, y: top.y + 13 }])
  brush.fill()
}

/** An alignment stick on the ground: what gives the clip its scale. */
function drawStick(brush: Brush, camera: Camera, from: Vec3, to: Vec3): void {
  const [a, b] = [project(camera, from), project(camera, to)]
  brush.lineCap = 'butt'
  for (const [colour, wide, drop] of [['#4F6440', 5, 2.4], ['#E8B93C', 3.6, 0]] as const) {
    brush.strokeStyle = colour
    brush.lineWidth = wide
    brush.beginPath()
    brush.moveTo(a.x, a.y + drop)
    brush.lineTo(b.x, b.y + drop)
    brush.stroke()
  }
}
