import { createHash, randomBytes } from 'node:crypto'
import { createReadStream, mkdirSync } from 'node:fs'
import { open, readFile } from 'node:fs/promises'
import { join } from 'node:path'

/** A valid film of any size: the short one with a `free` box behind it (ISO/IEC 14496-12, 8.1.2), whose bytes mean nothing. */
export async function makePaddedFilm(folder: string, bytes: number): Promise<string> {
  const film = await readFile('tests/support/film/made/plain-30.mp4')
  mkdirSync(folder, { recursive: true })
  const path = join(folder, `padded-${bytes}.mp4`)
  const file = await open(path, 'w')
  try {
    const head = Buffer.alloc(8)
    head.writeUInt32BE(bytes - film.length, 0)
    head.write('free', 4, 'latin1')
    await file.write(Buffer.concat([film, head]))
    // One random block over and over: no two parts are alike, since it is no divisor of a part.
    const block = randomBytes(1_000_003)
    for (let left = bytes - film.length - head.length; left > 0; left -= block.length) {
      await file.write(block, 0, Math.min(left, block.length))
    }
  }
  finally {
    await file.close()
  }
  return path
}

export async function sha256OfFile(path: string): Promise<string> {
  const hash = createHash('sha256')
  for await (const chunk of createReadStream(path)) hash.update(chunk)
  return hash.digest('hex')
}
