import { fileURLToPath } from 'node:url'
import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

const root = (path: string) => fileURLToPath(new URL(path, import.meta.url))

const alias = {
  '#shared': root('./shared'),
  '#server': root('./server'),
  '#fakes': root('./fakes'),
  '#tests': root('./tests'),
  '~': root('./app'),
}

/** Pure code and stand-ins in Node; components in happy-dom; handlers through HTTP on the built server. */
export default defineConfig({
  resolve: { alias },
  test: {
    projects: [
      {
        resolve: { alias },
        test: {
          name: 'unit',
          include: ['tests/unit/**/*.test.ts', 'tests/reference/**/*.test.ts'],
          environment: 'node',
          testTimeout: 20_000,
        },
      },
      {
        resolve: { alias },
        plugins: [vue()],
        test: {
          name: 'components',
          include: ['tests/components/**/*.test.ts'],
          environment: 'happy-dom',
          setupFiles: ['tests/components/setup.ts'],
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'server',
          include: ['tests/server/**/*.test.ts'],
          environment: 'node',
          globalSetup: ['tests/support/once.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
          maxWorkers: 2,
        },
      },
    ],
  },
})
