import { basename, dirname, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

const entry = fileURLToPath(new URL('./reader.worker.ts', import.meta.url))

/**
 * Bundles the film reader and all it imports into one self-contained module.
 *
 * For the build and for tests only: the running server is given the path of the file this wrote. Nitro follows imports but
 * not `new Worker`, so without this the built server would have no reader.
 *
 * Sets NODE_ENV to production where nobody had set it, as every Vite build does.
 *
 * @param outFile path ending in `.mjs`; its folder is made, other files in it are left alone
 */
export async function buildFilmWorker(outFile: string): Promise<void> {
  const { build } = await import('vite')
  const target = resolve(outFile)
  await build({
    configFile: false,
    envFile: false,
    publicDir: false,
    logLevel: 'warn',
    root: dirname(entry),
    ssr: { noExternal: true, target: 'node' },
    build: {
      ssr: entry,
      outDir: dirname(target),
      emptyOutDir: false,
      copyPublicDir: false,
      target: 'node20',
      minify: false,
      rollupOptions: { output: { format: 'es', entryFileNames: basename(target), inlineDynamicImports: true } },
    },
  })
}
