import pino from 'pino'

/** JSON lines on standard output. Never a secret, a letter's words, or a name: ids only. */
export type Log = pino.Logger

export function createLog(level: string): Log {
  return pino({
    level,
    base: undefined,
    redact: { paths: ['*.password', '*.token', '*.secret', '*.authorization', '*.cookie'], censor: '[removed]' },
  })
}
