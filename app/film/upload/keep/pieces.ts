/** Small enough to stay in a processor's cache and to keep memory flat however large the film, large enough to cost few calls. */
const PIECE_BYTES = 256 * 1024

/**
 * The bytes of a blob, piece by piece. Each piece is good only until the next is asked for: the memory is used again.
 * @throws the browser's own error when the file behind the blob is gone or changed
 */
export async function* piecesOf(blob: Blob): AsyncGenerator<Uint8Array<ArrayBuffer>> {
  const reader = findByteReader(blob)
  if (reader === undefined) {
    for (let at = 0; at < blob.size; at += PIECE_BYTES) yield new Uint8Array(await blob.slice(at, at + PIECE_BYTES).arrayBuffer())
    return
  }
  let memory = new ArrayBuffer(PIECE_BYTES)
  let filled = 0
  for (let isDone = false; !isDone;) {
    const { value, done } = await reader.read(new Uint8Array(memory, filled))
    isDone = done
    if (value !== undefined) {
      memory = value.buffer
      filled += value.byteLength
    }
    if (filled === PIECE_BYTES || (isDone && filled > 0)) {
      yield new Uint8Array(memory, 0, filled)
      filled = 0
    }
  }
}

/**
 * What a part weighs: SHA-256 over the SHA-256 of its pieces, in lower-case hex, since the browser hashes nothing in steps and all of
 * a part at once would be held in memory twice. Handed the pieces as they pass, for whoever copies them.
 */
export async function weigh(blob: Blob, onPiece?: (piece: Uint8Array<ArrayBuffer>) => void): Promise<string> {
  const digests: ArrayBuffer[] = []
  for await (const piece of piecesOf(blob)) {
    onPiece?.(piece)
    digests.push(await crypto.subtle.digest('SHA-256', piece))
  }
  const whole = await crypto.subtle.digest('SHA-256', await new Blob(digests).arrayBuffer())
  return Array.from(new Uint8Array(whole), byte => byte.toString(16).padStart(2, '0')).join('')
}

/** Undefined where blobs cannot be read into memory that is there already. */
function findByteReader(blob: Blob): ReadableStreamBYOBReader | undefined {
  try {
    return blob.stream().getReader({ mode: 'byob' })
  }
  catch {
    return undefined
  }
}
