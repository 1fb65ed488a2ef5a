import { defineConfig } from 'vitest/config'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('.', import.meta.url))
const alias = { '@': root.replace(/\/$/, '') }

/** A project of the main set: real files, own process, console.error fails it. */
function project(name: string, include: string[], more: Record<string, unknown> = {}) {
  return {
    resolve: { alias },
    test: {
      name,
      include,
      environment: 'node' as const,
      pool: 'forks' as const,
      setupFiles: ['tests/support/no-console-error.ts'],
      testTimeout: 30_000,
      hookTimeout: 60_000,
      ...more,
    },
  }
}

const database = { globalSetup: ['tests/support/template-database.ts'] }

/** The fireside's measures do not all hold yet: they run by `npm run test:measures`, not in the main set. */
const journeys =
  process.env['MEASURES'] === '1' ? ['tests/measures/**/*.measure.ts'] : ['tests/journeys/**/*.test.ts']

export default defineConfig({
  test: {
    maxWorkers: 2,
    projects: [
      project('house', ['tests/architecture.test.ts', 'tests/lockfile.test.ts', 'tests/types.test.ts']),
      project('science', ['tests/science/**/*.test.ts']),
      project('gateway', ['tests/gateway/**/*.test.ts', 'tests/simulators/**/*.test.ts']),
      project('ui', ['tests/ui/**/*.test.{ts,tsx}'], { environment: 'happy-dom' }),
      project('areas', ['tests/areas/**/*.test.ts'], database),
      project('api', ['tests/api/**/*.test.ts'], database),
      project('live', ['tests/live/**/*.test.ts'], database),
      project('regressions', ['tests/regressions/**/*.test.{ts,tsx}'], database),
      project('faults', ['tests/faults/**/*.test.ts'], { testTimeout: 600_000, hookTimeout: 300_000 }),
      project('journeys', journeys, { testTimeout: 300_000, hookTimeout: 300_000 }),
    ],
  },
})
