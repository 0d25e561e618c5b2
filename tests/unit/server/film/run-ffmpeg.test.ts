import { chmod, mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ffmpegArguments } from '#server/features/film/convert/ffmpeg-arguments'
import { runFfmpeg } from '#server/features/film/convert/run-ffmpeg'

let folder: string

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'run-ffmpeg-'))
})

afterAll(() => rm(folder, { recursive: true }))

async function program(name: string, script: string): Promise<string> {
  const path = join(folder, name)
  await writeFile(path, `#!/bin/sh\n${script}\n`)
  await chmod(path, 0o700)
  return path
}

const LIMIT_MS = 10_000

describe('running ffmpeg', () => {
  it('gives what it printed', async () => {
    const path = await program('prints', 'echo "$1 and $2"')
    expect(await runFfmpeg({ path, commandArguments: ['one', 'two words'], timeLimitMs: LIMIT_MS })).toEqual({ ok: true, output: 'one and two words\n' })
  })

  it('gives its complaint when it fails, and is not thrown off by one that is not there', async () => {
    const path = await program('fails', 'echo "no such codec" >&2; exit 3')
    expect(await runFfmpeg({ path, commandArguments: [], timeLimitMs: LIMIT_MS })).toEqual({ ok: false, complaint: 'no such codec\n' })
    expect(await runFfmpeg({ path: join(folder, 'missing'), commandArguments: [], timeLimitMs: LIMIT_MS })).toMatchObject({ ok: false, complaint: expect.stringContaining('ENOENT') })
    const silent = await program('silent', 'exit 4')
    expect(await runFfmpeg({ path: silent, commandArguments: [], timeLimitMs: LIMIT_MS })).toEqual({ ok: false, complaint: 'ended with 4' })
  })

  it('ends it at the time limit, even when it will not listen', async () => {
    const path = await program('hangs', 'trap "" TERM INT; while :; do :; done')
    const startedAt = performance.now()
    expect(await runFfmpeg({ path, commandArguments: [], timeLimitMs: 300 })).toEqual({ ok: false, complaint: 'took over 300 ms' })
    expect(performance.now() - startedAt).toBeLessThan(5000)
  })

  it('keeps no more of what it prints than a list of tags has', async () => {
    const path = await program('floods', 'yes | head -c 3000000; yes | head -c 3000000 >&2')
    const outcome = await runFfmpeg({ path, commandArguments: [], timeLimitMs: LIMIT_MS })
    expect(outcome.ok && outcome.output.length).toBeLessThan(1024 * 1024)
  })

  it('hands it none of the server\'s settings', async () => {
    const path = await program('tells', 'env | cut -d= -f1')
    const outcome = await runFfmpeg({ path, commandArguments: [], timeLimitMs: LIMIT_MS })
    expect(outcome.ok && outcome.output.split('\n').filter(name => name !== '' && !['PWD', 'OLDPWD', 'SHLVL', '_'].includes(name))).toEqual([])
  })
})

describe('what ffmpeg is told', () => {
  const told = ffmpegArguments({ from: 'in file', to: 'out file', demuxer: 'mov' })
  const valueOf = (option: string) => told[told.indexOf(option) + 1]

  it('reads a file of the named format and nothing from elsewhere', () => {
    expect(valueOf('-protocol_whitelist')).toBe('file')
    expect(told.indexOf('-f')).toBeLessThan(told.indexOf('-i'))
    expect(valueOf('-f')).toBe('mov')
    expect(valueOf('-i')).toBe('in file')
  })

  it('leaves out sound, tags and chapters, and keeps the time of every frame', () => {
    expect(told).toEqual(expect.arrayContaining(['-an', '-sn', '-dn', '-map_chapters', 'passthrough']))
    expect(told.slice(told.indexOf('0:v:0')).join(' ')).toContain('-map_metadata -1')
    expect(told.at(-1)).toBe('out file')
  })
})
