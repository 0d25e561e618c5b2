/** Points that can be marked on film, as measuring names them. */
export const MARKS = [
  'ball', 'gripEnd', 'clubHead', 'neckBase', 'head',
  'leadShoulder', 'leadElbow', 'leadWrist', 'leadHip', 'leadKnee', 'leadHeel', 'leadToe',
  'trailShoulder', 'trailElbow', 'trailWrist', 'trailHip', 'trailKnee', 'trailHeel', 'trailToe',
  'seatRear',
] as const

export type Mark = typeof MARKS[number]
