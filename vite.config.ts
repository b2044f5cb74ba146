import { defineConfig } from 'vitest/config'
import vue from '@vitejs/plugin-vue'
import { quasar, transformAssetUrls } from '@quasar/vite-plugin'

const api = process.env.API_URL ?? 'http://127.0.0.1:3000'

/** Client build and dev server at the top level; below it the four Vitest projects. */
export default defineConfig({
  plugins: [vue({ template: { transformAssetUrls } }), quasar()],
  publicDir: 'src/public',
  build: { outDir: 'dist/client', emptyOutDir: true, target: 'es2022', manifest: true },
  server: { host: '127.0.0.1', proxy: { '/api': api, '/healthz': api, '/readyz': api } },
  test: {
    projects: [
      {
        test: { name: 'unit', environment: 'node', include: ['tests/unit/**/*.test.ts'] },
      },
      {
        test: {
          name: 'api',
          environment: 'node',
          pool: 'forks',
          include: ['tests/api/**/*.test.ts'],
          globalSetup: ['tests/support/globalDatabase.ts'],
          hookTimeout: 60_000,
          testTimeout: 30_000,
        },
      },
      {
        test: {
          name: 'jobs',
          environment: 'node',
          pool: 'forks',
          include: ['tests/jobs/**/*.test.ts'],
          globalSetup: ['tests/support/globalDatabase.ts'],
          hookTimeout: 60_000,
          testTimeout: 60_000,
        },
      },
      {
        plugins: [vue({ template: { transformAssetUrls } }), quasar()],
        test: {
          name: 'components',
          environment: 'happy-dom',
          setupFiles: ['tests/support/components.ts'],
          include: ['tests/components/**/*.test.ts'],
        },
      },
    ],
  },
})
