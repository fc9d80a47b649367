import { readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { brotliCompressSync, constants } from 'node:zlib'
import vue from '@vitejs/plugin-vue'
import type { Plugin } from 'vite'
import { defineConfig } from 'vitest/config'

/** Leaves a `.br` beside each script and style, and says how much of them a first visit loads. */
function compressed(): Plugin {
  let dir = ''
  return {
    name: 'compressed',
    apply: 'build',
    configResolved: (config) => void (dir = config.build.outDir),
    closeBundle() {
      const sizes = new Map<string, number>()
      for (const name of readdirSync(join(dir, 'assets')).filter((file) =>
        /\.(js|css|svg|wasm)$/.test(file),
      )) {
        const file = join(dir, 'assets', name)
        const params = { [constants.BROTLI_PARAM_QUALITY]: 11 }
        const bytes = brotliCompressSync(readFileSync(file), { params })
        writeFileSync(`${file}.br`, bytes)
        sizes.set(name, bytes.length)
      }
      const page = readFileSync(join(dir, 'index.html'), 'utf8')
      const first = (ending: string) =>
        [...sizes]
          .filter(([name]) => name.endsWith(ending) && page.includes(name))
          .reduce((sum, [, n]) => sum + n, 0)
      const kb = (bytes: number) => `${(bytes / 1000).toFixed(1)} kB`
      console.warn(`First visit, brotli: JavaScript ${kb(first('.js'))}, styles ${kb(first('.css'))}`)
    },
  }
}

export default defineConfig({
  plugins: [vue(), compressed()],
  cacheDir: '.cache/vite',
  publicDir: 'src/public',
  resolve: { alias: { '@': new URL('./src', import.meta.url).pathname } },
  html: { cspNonce: '__CSP_NONCE__' },
  build: { outDir: 'dist/client', emptyOutDir: true, sourcemap: false, reportCompressedSize: false },
  test: {
    reporters: ['default'],
    projects: [
      {
        extends: true,
        test: {
          name: 'domain',
          setupFiles: ['tests/support/fixed-seed.ts'],
          include: ['tests/domain/**/*.test.ts'],
          environment: 'node',
        },
      },
      {
        extends: true,
        test: {
          name: 'api',
          setupFiles: ['tests/support/fixed-seed.ts'],
          include: ['tests/api/**/*.test.ts'],
          environment: 'node',
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'components',
          setupFiles: ['tests/support/fixed-seed.ts'],
          include: ['tests/components/**/*.test.ts'],
          environment: 'happy-dom',
        },
      },
      {
        extends: true,
        test: {
          name: 'journeys',
          include: ['tests/journeys/**/*.test.ts'],
          environment: 'node',
          testTimeout: 120_000,
          hookTimeout: 120_000,
          fileParallelism: false,
        },
      },
    ],
  },
})
