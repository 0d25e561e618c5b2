import { spawn } from 'node:child_process'

export interface FfmpegRun {
  path: string
  commandArguments: string[]
  timeLimitMs: number
}

/** A film's tags are a few lines; what is longer is no such list. */
const MAX_OUTPUT_CHARACTERS = 64 * 1024
const MAX_COMPLAINT_CHARACTERS = 500

export type FfmpegOutcome = { ok: true, output: string } | { ok: false, complaint: string }

/** Runs ffmpeg to its end, or ends it at the time limit. Never throws: whatever goes wrong is its complaint. */
export async function runFfmpeg({ path, commandArguments, timeLimitMs }: FfmpegRun): Promise<FfmpegOutcome> {
  return new Promise((resolve) => {
    // No settings of the server: a film that takes ffmpeg over finds no keys.
    const child = spawn(path, commandArguments, { stdio: ['ignore', 'pipe', 'pipe'], env: {} })
    let output = ''
    let complaint = ''
    const timer = setTimeout(() => {
      complaint = `took over ${timeLimitMs} ms`
      child.kill('SIGKILL')
    }, timeLimitMs)
    child.stdout.setEncoding('utf8').on('data', (text: string) => {
      if (output.length < MAX_OUTPUT_CHARACTERS) output += text
    })
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      if (complaint.length < MAX_COMPLAINT_CHARACTERS) complaint += text
    })
    child.once('error', (error) => {
      clearTimeout(timer)
      resolve({ ok: false, complaint: error.message })
    })
    child.once('close', (code, signal) => {
      clearTimeout(timer)
      resolve(code === 0 ? { ok: true, output } : { ok: false, complaint: complaint || `ended with ${code ?? signal}` })
    })
  })
}
