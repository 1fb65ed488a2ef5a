import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { withCluster } from './postgres.mjs'
import { typescript } from './processes.mjs'
import { run } from './run.mjs'
import { main } from './say.mjs'

/**
 * `npm run test:faults [-- --kills N --seed S]`: kills server, PostgreSQL and gateway under load, fills disks, cuts
 * networks, and compares after each. On a cluster of its own that writes to disk as production does; it is killed too.
 */
await main(async () => {
  await holdLock('faults', 'npm run test:faults')
  await ensurePackages()
  return withCluster('faults', { own: true }, async () => {
    const program = typescript('tests/faults/run.ts', ...process.argv.slice(2))
    return (await run(process.execPath, program, { show: true })).code
  })
})
