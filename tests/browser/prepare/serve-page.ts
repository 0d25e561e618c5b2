import { createReadStream, existsSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { extname, join, normalize } from 'node:path'
import { fileURLToPath } from 'node:url'
import { build } from 'vite'

const root = (path: string) => fileURLToPath(new URL(`../../../${path}`, import.meta.url))

/** What the app's own pages may run: the worker must live under it. */
const POLICY = 'default-src \'self\'; script-src \'self\'; worker-src \'self\' blob:; connect-src \'self\'; img-src \'self\' data: blob:; media-src \'self\' blob:'

const TYPES: Record<string, string> = { '.html': 'text/html', '.js': 'text/javascript', '.mp4': 'video/mp4', '.mov': 'video/quicktime', '.webm': 'video/webm' }

/** Where the page finds films: those of the tests, and those of the demo. */
const FILMS: Record<string, string> = { '/films/': root('tests/support/film/made/'), '/demo/': root('fakes/demo/film/made/') }

export interface ServedPage {
  address: string
  close(): Promise<void>
}

/**
 * Builds a page of `app/film/prepare` and a few lines around it, and serves it on 127.0.0.1.
 * @param pageDir folder with an `index.html`, from the root of the repository
 * @param outDir from there too; emptied
 */
export async function servePage(pageDir: string, outDir: string): Promise<ServedPage> {
  await build({
    configFile: false,
    envFile: false,
    logLevel: 'warn',
    root: root(pageDir),
    resolve: { alias: { '#shared': root('shared'), '~': root('app') } },
    build: { outDir: root(outDir), emptyOutDir: true, target: 'es2022', modulePreload: false },
  })
  const server = createServer((request, response) => {
    const path = normalize(decodeURIComponent(new URL(request.url ?? '/', 'http://127.0.0.1').pathname))
    const [prefix, folder] = Object.entries(FILMS).find(([start]) => path.startsWith(start)) ?? ['/', root(outDir)]
    const file = join(folder, path === '/' ? 'index.html' : path.slice(prefix.length))
    if (!existsSync(file)) {
      // Every browser asks for a picture of its own accord.
      response.writeHead(path === '/favicon.ico' ? 204 : 404).end()
      return
    }
    response.writeHead(200, { 'content-type': TYPES[extname(file)] ?? 'application/octet-stream', 'content-security-policy': POLICY })
    createReadStream(file).pipe(response)
  })
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const address = server.address()
  if (!isAddress(address)) throw new Error('The page has no address.')
  return {
    address: `http://127.0.0.1:${address.port}/`,
    close: () => new Promise((resolve, reject) => {
      server.closeAllConnections()
      server.close(error => error ? reject(error) : resolve())
    }),
  }
}

function isAddress(address: AddressInfo | string | null): address is AddressInfo {
  return typeof address === 'object' && address !== null
}
