import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

export default defineConfig({
  plugins: [vue()],
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
          include: ['tests/domain/**/*.test.ts'],
          environment: 'node',
        },
      },
      {
        extends: true,
        test: {
          name: 'api',
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
