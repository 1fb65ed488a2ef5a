import { parseArgs } from 'node:util'
import { startCluster } from '@/lib/setup/postgres.mjs'
import { killChildren } from '@/tests/faults/child'
import { countsOf, faultKinds, noCounts } from '@/tests/faults/deck'
import { printReport } from '@/tests/faults/report'
import { unmountAll } from '@/tests/faults/spool-disk'
import { runFaults } from '@/tests/faults/suite'

// `npm run test:faults [-- --kills N --seed S --only FAULT]`: the whole suite on its own cluster; status 1 when anything
// was lost. The same seed gives the same faults in the same order.

const { values } = parseArgs({
  options: {
    kills: { type: 'string', default: '100' },
    only: { type: 'string' },
    seed: { type: 'string', default: String(Date.now() % 1_000_000_000) },
  },
})
const [kills, seed] = [Number(values.kills), Number(values.seed)]
if (!(Number.isInteger(kills) && kills >= 1 && Number.isInteger(seed))) {
  process.stderr.write('Give whole numbers: --kills N --seed S\n')
  process.exit(2)
}
const only = faultKinds.find((kind) => kind === values.only)
if (values.only !== undefined && only === undefined) {
  process.stderr.write(`There is no such fault. Choose one: ${faultKinds.join(', ')}\n`)
  process.exit(2)
}
for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => {
    killChildren()
    unmountAll()
    process.exit(130)
  })
}
const report = await runFaults({
  cluster: await startCluster('faults'),
  seed,
  counts: only === undefined ? countsOf(kills) : { ...noCounts(), [only]: kills },
  rounds: Math.max(1, Math.round(kills / 10)),
  longCuts: { count: kills >= 50 ? 2 : 0, seconds: 60 },
  say: (line) => void process.stdout.write(`${line}\n`),
})
process.stdout.write(`\n${printReport(report)}\n`)
process.exit(report.failures.length === 0 ? 0 : 1)
