import tailwindcss from '@tailwindcss/vite'
import react from '@vitejs/plugin-react'
import { defineConfig } from 'vitest/config'

/** Client build and test projects in one place: `unit` runs in Node, `ui` in jsdom. */
export default defineConfig({
  plugins: [react(), tailwindcss()],
  publicDir: 'src/public',
  build: { outDir: 'dist', sourcemap: false, target: 'es2022' },
  test: {
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          environment: 'node',
          include: ['shared/**/*.test.ts', 'server/**/*.test.ts', 'seeds-demo/**/*.test.ts', 'tests/{architecture,golden,properties,documents,content}/**/*.test.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'ui',
          environment: 'jsdom',
          include: ['src/**/*.test.{ts,tsx}', 'tests/ui/**/*.test.{ts,tsx}'],
          setupFiles: ['tests/support/ui-setup.ts'],
        },
      },
      { extends: true, test: { name: 'api', environment: 'node', include: ['tests/api/**/*.test.ts'], testTimeout: 30_000, hookTimeout: 60_000 } },
      {
        extends: true,
        test: { name: 'process', environment: 'node', include: ['tests/process/**/*.test.ts'], testTimeout: 180_000, hookTimeout: 120_000, fileParallelism: false },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          environment: 'node',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/support/browser-setup.ts'],
          testTimeout: 180_000,
          hookTimeout: 180_000,
          // A journey waits more than it works: two side by side, each with a server and devices of its own.
          maxWorkers: 2,
        },
      },
    ],
  },
})
