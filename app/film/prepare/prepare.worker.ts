import { ClipProblem } from './clip-problem'
import { forgetOld } from './device-storage'
import { measureMotion } from './measure-motion'
import { prepareFilm } from './prepare-film'
import type { FromWorker, Progress, ToWorker, Watch, WorkerTask } from './worker-message'

/** Often enough to look alive, rarely enough to cost nothing. */
const TELL_EVERY_MS = 100

const stopping = new AbortController()

addEventListener('message', ({ data: message }: MessageEvent<ToWorker>) => {
  if (message.kind === 'stop') stopping.abort()
  else void run(message).then(tell)
})

async function run(task: WorkerTask): Promise<FromWorker> {
  const watch = makeWatch()
  try {
    if (task.kind === 'measure-motion') return { kind: 'motion', samples: await measureMotion(task.file, watch) }
    // Beside the work, not before it; what it does not get to is for the next time.
    void forgetOld(Date.now()).catch(() => undefined)
    return { kind: 'prepared', prepared: await prepareFilm(task.file, task.keep, watch) }
  }
  catch (error) {
    if (watch.signal.aborted) return { kind: 'stopped' }
    if (error instanceof ClipProblem) return { kind: 'problem', reason: error.reason, detail: error.message }
    return { kind: 'failed', message: error instanceof Error ? error.message : String(error) }
  }
}

function makeWatch(): Watch {
  let toldMs = -Infinity
  return {
    signal: stopping.signal,
    onProgress(progress: Progress) {
      const nowMs = performance.now()
      if (nowMs - toldMs < TELL_EVERY_MS && progress.done < progress.total) return
      toldMs = nowMs
      tell({ kind: 'progress', progress })
    },
  }
}

function tell(message: FromWorker): void {
  postMessage(message)
}
