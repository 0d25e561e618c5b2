/** One thing that passed or did not: a test, or a whole stage that counts as one (lint, types, build). */
export interface Outcome {
  /** With the titles around it, outermost first: tags stand in these. */
  title: string
  /** From the project's root; undefined for a stage that counts as one. */
  file: string | undefined
  hasPassed: boolean
  /** What went wrong, as its tool said it; empty when nothing did. */
  message: string
}

export type StageName = 'lint' | 'types' | 'unit' | 'components' | 'build' | 'server' | 'browser'

export interface StageResult {
  name: StageName
  seconds: number
  outcomes: Outcome[]
  /** All that the stage printed, for a failure that no single test explains. */
  output: string
}

/** A skipped test proves nothing and looks like one that does, so it counts as failed. */
export const SKIPPED = 'Skipped: run it or delete it.'

// eslint-disable-next-line no-control-regex -- colours are control characters
const COLOURS = /\u001B\[[0-9;]*m/g

/** Tools colour their messages even into files. */
export function withoutColours(text: string): string {
  return text.replaceAll(COLOURS, '')
}
