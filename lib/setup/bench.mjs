import { chromium } from './chromium.mjs'
import { ensureBuild } from './build.mjs'
import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { withCluster } from './postgres.mjs'
import { typescript } from './processes.mjs'
import { run } from './run.mjs'
import { main, say } from './say.mjs'
import { testDatabaseEnvironment } from './test-environment.mjs'

await main(async () => {
  await holdLock('bench', 'npm run bench')
  await ensurePackages()
  // Unlike the tests' cluster this one writes to disk as production does: that is what is measured.
  return withCluster('bench', {}, async (cluster) => {
    const path = await chromium()
    await ensureBuild('npm run bench')
    say('measuring')
    const told = { ...testDatabaseEnvironment(cluster), CHROMIUM_PATH: path, NEXT_TELEMETRY_DISABLED: '1' }
    const program = typescript('tests/bench/run.ts', ...process.argv.slice(2))
    return (await run(process.execPath, program, { env: { ...process.env, ...told }, show: true })).code
  })
})
