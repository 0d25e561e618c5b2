import { PartError } from './send-parts'

/** A line can die without a word; after this long without a byte moving the part counts as lost. */
const SILENCE_MAX_MS = 45_000

/**
 * Sends one part straight to the store. XMLHttpRequest, because fetch cannot report what has left.
 * @param onSentBytes bytes of this part so far
 * @throws PartError; the signal's reason when it is aborted
 */
export function putPart(bytes: Blob, url: string, onSentBytes: (bytes: number) => void, signal: AbortSignal): Promise<void> {
  return new Promise((resolve, reject) => {
    signal.throwIfAborted()
    const request = new XMLHttpRequest()
    const cancel = () => request.abort()
    let silence = 0
    const listen = () => {
      window.clearTimeout(silence)
      silence = window.setTimeout(cancel, SILENCE_MAX_MS)
    }
    const settle = (end: () => void) => {
      window.clearTimeout(silence)
      signal.removeEventListener('abort', cancel)
      end()
    }
    request.upload.onprogress = (event) => {
      listen()
      onSentBytes(event.loaded)
    }
    request.onload = () => settle(() => {
      if (request.status >= 200 && request.status < 300) resolve()
      else reject(new PartError({ kind: 'status', status: request.status }))
    })
    request.onerror = () => settle(() => reject(new PartError({ kind: 'network' })))
    request.onabort = () => settle(() => reject(signal.aborted ? signal.reason : new PartError({ kind: 'network' })))
    signal.addEventListener('abort', cancel)
    request.open('PUT', url)
    listen()
    // A slice has no type and so sends no Content-Type: the address is signed for the bytes alone.
    request.send(bytes.slice())
  })
}
