import type { IncomingMessage } from 'node:http'
import { createHash } from 'node:crypto'
import { open, rm } from 'node:fs/promises'
import type { ChecksumAlgorithm, Checksums } from './checksums'
import { CHECKSUM_ALGORITHMS, createChecksum, isBase64Of, readClaimedChecksums } from './checksums'
import { newTempPath } from './disk'
import { Refusal } from './refusals'
import type { StorageRequest } from './request'
import { findAmzValue } from './request'
import { UNSIGNED_PAYLOAD } from './sigv4'

const MAX_PUT_BYTES = 5 * 1024 ** 3
const MAX_MESSAGE_BYTES = 4 * 1024 ** 2

/** Thrown when a test asked for the connection to be cut in the middle of this body. */
export class CutOnPurpose extends Error {}

export interface Received {
  tempPath: string
  bytes: number
  md5Hex: string
  checksums: Checksums
}

/** A body whose claims (length, hash, checksums, MD5) are checked as it passes by. */
export class BodyReceiver {
  constructor(
    private readonly request: StorageRequest,
    private readonly payloadHash: string,
    private readonly acceptBody: () => void,
    private readonly cutAfterBytes: number = Number.POSITIVE_INFINITY,
  ) {}

  /**
   * Streams the body to a new file in `dataDir`/tmp and gives it to `use`, which moves it away; what is still there
   * afterwards is removed, also when a claim was false or the client went away.
   */
  async toFile<T>(dataDir: string, use: (received: Received) => Promise<T>): Promise<T> {
    const checker = new ClaimChecker(this.request, this.payloadHash)
    this.#refuseByLength()
    this.acceptBody()
    const tempPath = newTempPath(dataDir)
    try {
      const file = await open(tempPath, 'wx')
      try {
        // One awaited write at a time: the socket waits for the disk, and no more than a chunk is held in memory.
        for await (const chunk of this.#chunks(checker)) await file.write(chunk)
      }
      finally {
        await file.close()
      }
      return await use({ tempPath, ...checker.finish() })
    }
    finally {
      await rm(tempPath, { force: true })
    }
  }

  /** The body as text, for XML messages and for requests that should have none. */
  async toText(): Promise<string> {
    const checker = new ClaimChecker(this.request, this.payloadHash)
    if (Number(this.request.headers.get('content-length') ?? 0) > MAX_MESSAGE_BYTES) throw new Refusal('message-too-long')
    this.acceptBody()
    const chunks: Buffer[] = []
    let bytes = 0
    for await (const chunk of this.#chunks(checker)) {
      bytes += chunk.length
      if (bytes > MAX_MESSAGE_BYTES) throw new Refusal('message-too-long')
      chunks.push(chunk)
    }
    checker.finish()
    return Buffer.concat(chunks).toString('utf8')
  }

  #refuseByLength(): void {
    const length = this.request.headers.get('content-length')
    if (length === undefined) throw new Refusal('missing-content-length')
    if (Number(length) > MAX_PUT_BYTES) {
      throw new Refusal('entity-too-large', '', { ProposedSize: length, MaxSizeAllowed: String(MAX_PUT_BYTES) })
    }
  }

  async* #chunks(checker: ClaimChecker): AsyncGenerator<Buffer> {
    for await (const chunk of bodyOf(this.request.incoming)) {
      checker.update(chunk)
      if (checker.bytes >= this.cutAfterBytes) throw new CutOnPurpose()
      yield chunk
    }
  }
}

async function* bodyOf(incoming: IncomingMessage): AsyncGenerator<Buffer> {
  // Stopping early (a full disk, a message too long) must leave the connection open, or the reason could not be told.
  for await (const chunk of incoming.iterator({ destroyOnReturn: false })) {
    const bytes: unknown = chunk
    if (Buffer.isBuffer(bytes)) yield bytes
  }
}

class ClaimChecker {
  bytes = 0
  readonly #claimed: Checksums
  readonly #claimedMd5: string | undefined
  readonly #md5 = createHash('md5')
  readonly #sha256
  readonly #running

  constructor(request: StorageRequest, private readonly payloadHash: string) {
    this.#claimed = readClaimedChecksums(name => findAmzValue(request, name))
    this.#claimedMd5 = request.headers.get('content-md5')
    if (this.#claimedMd5 !== undefined && !isBase64Of(this.#claimedMd5, 16)) throw new Refusal('invalid-content-md5')
    this.#sha256 = payloadHash === UNSIGNED_PAYLOAD ? undefined : createHash('sha256')
    this.#running = CHECKSUM_ALGORITHMS.filter(algorithm => this.#claimed[algorithm] !== undefined)
      .map(algorithm => [algorithm, createChecksum(algorithm)] as const)
  }

  update(chunk: Buffer): void {
    this.bytes += chunk.length
    this.#md5.update(chunk)
    this.#sha256?.update(chunk)
    for (const [, checksum] of this.#running) checksum.update(chunk)
  }

  finish(): { bytes: number, md5Hex: string, checksums: Checksums } {
    const sha256 = this.#sha256?.digest('hex')
    if (sha256 !== undefined && sha256 !== this.payloadHash) {
      throw new Refusal('content-sha256-mismatch', '', {
        ClientComputedContentSHA256: this.payloadHash, S3ComputedContentSHA256: sha256,
      })
    }
    const md5 = this.#md5.digest()
    if (this.#claimedMd5 !== undefined && this.#claimedMd5 !== md5.toString('base64')) {
      throw new Refusal('content-md5-mismatch', '', { ExpectedDigest: this.#claimedMd5, CalculatedDigest: md5.toString('base64') })
    }
    for (const [algorithm, checksum] of this.#running) this.#compare(algorithm, checksum.digestBase64())
    return { bytes: this.bytes, md5Hex: md5.toString('hex'), checksums: this.#claimed }
  }

  #compare(algorithm: ChecksumAlgorithm, computed: string): void {
    const claimed = this.#claimed[algorithm] ?? ''
    if (claimed === computed) return
    throw new Refusal('checksum-mismatch', `${algorithm.toUpperCase()}: ${claimed} claimed, ${computed} calculated`)
  }
}
