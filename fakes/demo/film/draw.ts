import type { Camera } from './camera'
import { project } from './camera'
import type { DrawnMarks } from './draw-golfer'
import { drawGolfer, drawShadow } from './draw-golfer'
import { drawScene } from './draw-scene'
import { OUTFITS } from './outfits'
import type { Brush } from './paint'
import { lightFor } from './scene'
import { BALL_RADIUS_MM, CLUBS } from './swing-kinds'
import type { Moment, Timeline } from './timeline'
import { momentAt } from './timeline'
import type { Vec3 } from './vector'
import { along } from './vector'

/** What stands still in a clip. */
export function drawBackground(brush: Brush, timeline: Timeline): void {
  drawScene(brush, timeline.camera, timeline.clip.hands)
}

/** What moves in one frame, over the background; says where each mark was drawn, in pixels of the frame. */
export function drawFrame(brush: Brush, timeline: Timeline, clipS: number): DrawnMarks {
  const { camera, clip } = timeline
  const moment = momentAt(timeline, clipS)
  drawShadow(brush, camera, moment.body, clip.club, lightFor(camera))
  if (moment.ball) drawBallShadow(brush, camera, moment.ball)
  if (CLUBS[clip.club].teeMm > 0) drawTee(brush, camera, CLUBS[clip.club].teeMm)
  const isBallBehind = moment.ball !== undefined && project(camera, moment.ball).depthMm > project(camera, moment.body.clubHead).depthMm
  const before: DrawnMarks = isBallBehind ? drawBall(brush, camera, moment) : {}
  const drawn = drawGolfer(brush, camera, moment.body, clip.club, OUTFITS[clip.outfit])
  const after: DrawnMarks = isBallBehind ? {} : drawBall(brush, camera, moment)
  drawTurf(brush, camera, moment)
  return { ...before, ...drawn, ...after }
}

function drawBall(brush: Brush, camera: Camera, moment: Moment): DrawnMarks {
  if (!moment.ball) return {}
  const place = project(camera, moment.ball)
  const radiusPx = Math.max(0.6, BALL_RADIUS_MM * place.pxPerMm)
  const light = brush.createRadialGradient(place.x - radiusPx * 0.35, place.y - radiusPx * 0.4, radiusPx * 0.1, place.x, place.y, radiusPx)
  light.addColorStop(0, '#FFFFFF')
  light.addColorStop(0.7, '#F2F4F1')
  light.addColorStop(1, '#C2CAC5')
  brush.fillStyle = light
  brush.beginPath()
  brush.arc(place.x, place.y, radiusPx, 0, 2 * Math.PI)
  brush.fill()
  return { ball: { x: place.x, y: place.y } }
}

function drawBallShadow(brush: Brush, camera: Camera, ball: Vec3): void {
  const light = lightFor(camera)
  const place = project(camera, along(ball, light, ball.y / -light.y))
  const radiusPx = BALL_RADIUS_MM * place.pxPerMm
  brush.save()
  brush.globalAlpha = 0.3
  brush.fillStyle = '#31432B'
  brush.beginPath()
  brush.ellipse(place.x, place.y, radiusPx * 1.25, radiusPx * 0.4, 0, 0, 2 * Math.PI)
  brush.fill()
  brush.restore()
}

function drawTee(brush: Brush, camera: Camera, teeMm: number): void {
  const [foot, top] = [project(camera, { x: 0, y: 0, z: 0 }), project(camera, { x: 0, y: teeMm, z: 0 })]
  brush.strokeStyle = '#F1E3B8'
  brush.lineWidth = 1.8
  brush.beginPath()
  brush.moveTo(foot.x, foot.y)
  brush.lineTo(top.x, top.y)
  brush.stroke()
}

function drawTurf(brush: Brush, camera: Camera, moment: Moment): void {
  brush.fillStyle = '#5A4A33'
  brush.beginPath()
  for (const speck of moment.turf) {
    const place = project(camera, speck.at)
    const radiusPx = speck.radiusMm * place.pxPerMm
    brush.moveTo(place.x + radiusPx, place.y)
    brush.arc(place.x, place.y, radiusPx, 0, 2 * Math.PI)
  }
  brush.fill()
}
