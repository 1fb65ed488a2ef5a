import { afterAll, beforeAll, expect, it } from 'vitest'
import { holdLock } from '@/lib/setup/lock.mjs'
import type { Cluster } from '@/lib/setup/postgres.mjs'
import { startCluster, stopCluster } from '@/lib/setup/postgres.mjs'
import { noCounts } from '@/tests/faults/deck'
import { printReport } from '@/tests/faults/report'
import { runFaults } from '@/tests/faults/suite'

/* A taste of `npm run test:faults`, on the same private cluster, which it kills. */

const seed = 20_260_408
let cluster: Cluster
let release = async () => {}

beforeAll(async () => {
  release = await holdLock('faults', 'the short form of the faults suite')
  cluster = await startCluster('faults')
})

afterAll(async () => {
  await stopCluster(cluster)
  await release()
})

it('kill -9 of server, PostgreSQL and gateway, a full disk, a cut and late messages lose, double and change nothing', async () => {
  const report = await runFaults({
    cluster,
    seed,
    counts: {
      ...noCounts(),
      'server killed': 1,
      'PostgreSQL killed': 1,
      'gateway killed': 1,
      'disk full': 1,
      'network cut': 1,
      'batches late': 1,
    },
    rounds: 1,
    longCuts: { count: 0, seconds: 0 },
    say: () => {},
  })
  process.stdout.write(`${printReport(report)}\n`)
  expect(report.failures).toEqual([])
  const acknowledged = Object.values(report.results).map((result) => result.acknowledged)
  expect(Math.max(...acknowledged)).toBeGreaterThan(0)
})
