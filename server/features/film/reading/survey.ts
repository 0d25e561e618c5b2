import type { Traces } from './traces'

/** What going over a film found before any library parsed it. */
export interface FilmSurvey {
  traces: Traces
  /** Undefined when the whole film is shown. */
  shown: ShownWindow | undefined
}

/** Half-open, in ticks of the picture track; frames outside are in the file but never shown. */
export interface ShownWindow {
  startTick: number
  endTick: number
}
