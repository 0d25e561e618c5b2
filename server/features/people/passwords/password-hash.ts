import { randomBytes, scrypt, timingSafeEqual } from 'node:crypto'
import { createHashQueue } from './hash-queue'

/** scrypt's parameters (RFC 7914): memory and time grow with 2^logN times `r`. */
export interface ScryptCost {
  logN: number
  r: number
  p: number
}

/** N 2^17, r 8, p 1: the first choice of the OWASP Password Storage Cheat Sheet for scrypt. */
const COST: ScryptCost = { logN: 17, r: 8, p: 1 }
const SALT_BYTES = 16
const KEY_BYTES = 32

const queue = createHashQueue(2, 64)

/** scrypt as RFC 7914 states it, two at once at most. */
export function derive(password: string | Buffer, salt: Buffer, cost: ScryptCost, keyBytes: number): Promise<Buffer> {
  const options = { N: 2 ** cost.logN, r: cost.r, p: cost.p, maxmem: 256 * cost.r * 2 ** cost.logN + 1024 * 1024 }
  return queue.run(() => new Promise((resolve, reject) => {
    scrypt(password, salt, keyBytes, options, (error, key) => error ? reject(error) : resolve(key))
  }))
}

/** The password as a self-describing string, `$scrypt$ln=17,r=8,p=1$salt$key`, salt and key in base64. */
export async function hashPassword(password: string, cost = COST): Promise<string> {
  const salt = randomBytes(SALT_BYTES)
  return describe(cost, salt, await derive(readable(password), salt, cost, KEY_BYTES))
}

/**
 * Whether `password` is the one that `stored` was made from. Without a stored one the same work is done for nothing, so that
 * an unknown address answers as late as a known one.
 * @throws when `stored` is not a hash of ours.
 */
export async function verifyPassword(password: string, stored: string | null | undefined): Promise<boolean> {
  const { cost, salt, key } = parse(stored ?? NOBODY)
  const isSame = timingSafeEqual(await derive(readable(password), salt, cost, key.length), key)
  return isSame && typeof stored === 'string'
}

/** True when `stored` was made with less work than hashes are made with now. */
export function isWeaker(stored: string, than = COST): boolean {
  const { cost } = parse(stored)
  return cost.logN < than.logN || cost.r < than.r || cost.p < than.p
}

/** A key that belongs to no password. */
const NOBODY = describe(COST, Buffer.alloc(SALT_BYTES), Buffer.alloc(KEY_BYTES))

/** Keyboards write one letter in different ways; composed, they are one password. */
function readable(password: string): string {
  return password.normalize('NFC')
}

function describe({ logN, r, p }: ScryptCost, salt: Buffer, key: Buffer): string {
  return `$scrypt$ln=${logN},r=${r},p=${p}$${salt.toString('base64')}$${key.toString('base64')}`
}

function parse(stored: string): { cost: ScryptCost, salt: Buffer, key: Buffer } {
  const parts = /^\$scrypt\$ln=(\d{1,2}),r=(\d{1,2}),p=(\d{1,2})\$([A-Za-z0-9+/=]+)\$([A-Za-z0-9+/=]+)$/.exec(stored)
  if (!parts) throw new Error('A stored password hash is not one of ours.')
  const [, logN, r, p, salt = '', key = ''] = parts
  return {
    cost: { logN: Number(logN), r: Number(r), p: Number(p) },
    salt: Buffer.from(salt, 'base64'),
    key: Buffer.from(key, 'base64'),
  }
}
