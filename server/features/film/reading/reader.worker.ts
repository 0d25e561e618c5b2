/**
 * Entry of the worker that reads one film and ends. Built into one file of its own by `build-worker`, since the
 * server's bundler does not follow `new Worker`.
 */
import { parentPort, workerData } from 'node:worker_threads'
import { answerTask } from './answer-task'
import { RangeReader } from './range-reader'
import { isReaderTask, ReaderSignal } from './reader-message'

if (!isReaderTask(workerData))
  throw new TypeError('This worker needs { url, bytes, signal }.')

const signal = new ReaderSignal(workerData.signal)
signal.markStarted()
const reader = new RangeReader({ url: workerData.url, bytes: workerData.bytes, onWait: change => signal.addWaits(change) })
parentPort?.postMessage(await answerTask(reader))
// Kept connections to the store would hold the thread open for seconds.
parentPort?.close()
