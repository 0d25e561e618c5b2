const CHUNK_BYTES = 0x8000

/** Bytes as text, so that they can cross from the page to the test. */
export function encodeBase64(buffer: ArrayBuffer): string {
  const bytes = new Uint8Array(buffer)
  let text = ''
  for (let at = 0; at < bytes.length; at += CHUNK_BYTES) text += String.fromCharCode(...bytes.subarray(at, at + CHUNK_BYTES))
  return btoa(text)
}
