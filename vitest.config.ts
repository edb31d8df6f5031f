import vue from '@vitejs/plugin-vue'
import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const alias = { '@': fileURLToPath(new URL('./src', import.meta.url)) }
const plugins = [vue()]

export default defineConfig({
  test: {
    env: { TZ: 'UTC' },
    projects: [
      { plugins, resolve: { alias }, test: { name: 'unit', include: ['tests/unit/**/*.test.ts'] } },
      { plugins, resolve: { alias }, test: { name: 'reference', include: ['tests/reference/**/*.test.ts'] } },
      {
        plugins,
        resolve: { alias },
        test: {
          name: 'api',
          include: ['tests/api/**/*.test.ts'],
          globalSetup: ['tests/api/global-setup.ts'],
          fileParallelism: false,
          isolate: false,
          testTimeout: 20_000,
          hookTimeout: 60_000,
        },
      },
    ],
  },
})
