import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { chromium } from './chromium.mjs'
import { ensureBuild } from './build.mjs'
import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { dataDir, makeDataDir, root } from './paths.mjs'
import { startCluster, withCluster } from './postgres.mjs'
import { run } from './run.mjs'
import { main, say, sayFailure, sayToStandardError } from './say.mjs'
import { testDatabaseEnvironment } from './test-environment.mjs'
import { countTests } from './test-count.mjs'

const folder = join(dataDir, 'test')
const reportPath = join(folder, 'results.json')
const summaryPath = join(folder, 'summary.txt')

await main(() => (process.argv.includes('--services') ? services() : test(process.argv.slice(2))))

/** For work on single tests: the cluster is started and left running, and its environment printed for a shell. */
async function services() {
  sayToStandardError()
  await ensurePackages()
  const environment = testDatabaseEnvironment(await startCluster('test', { fast: true }))
  for (const [name, value] of Object.entries(environment)) process.stdout.write(`export ${name}='${value}'\n`)
}

/** The whole set, or what the arguments choose; its last line is `N passed, N failed`. */
async function test(args) {
  let counts = { passed: 0, failed: 1 }
  try {
    makeDataDir()
    await holdLock('test', 'npm test')
    mkdirSync(folder, { recursive: true })
    for (const path of [reportPath, summaryPath]) rmSync(path, { force: true })
    counts = await setUpAndRun(args)
  } catch (error) {
    sayFailure(error)
  }
  const summary = `${counts.passed} passed, ${counts.failed} failed`
  writeFileSync(summaryPath, `${summary}\n`)
  process.stdout.write(`${summary}\n`)
  return counts.failed > 0 || counts.passed === 0 ? 1 : 0
}

async function setUpAndRun(args) {
  await ensurePackages()
  return withCluster('test', { fast: true }, async (cluster) => {
    const { told, skipped } = wantsJourneys(args) ? await prepareJourneys() : { told: {}, skipped: [] }
    say('running the tests')
    const env = { ...process.env, ...testDatabaseEnvironment(cluster), ...told, NEXT_TELEMETRY_DISABLED: '1' }
    const counts = await runVitest([...args, ...skipped], env)
    return { ...counts, failed: counts.failed + (skipped.length > 0 ? 1 : 0) }
  })
}

/** A browser and a build. Where they cannot be had that counts as one failed, and the other tests run all the same. */
async function prepareJourneys() {
  try {
    const path = await chromium()
    await ensureBuild('npm test')
    return { told: { CHROMIUM_PATH: path }, skipped: [] }
  } catch (error) {
    sayFailure(error)
    say('the journeys cannot run, which counts as one failed; the other tests run now')
    return { told: {}, skipped: ['--project', '!journeys'] }
  }
}

async function runVitest(args, environment) {
  const vitest = join(root, 'node_modules', 'vitest', 'vitest.mjs')
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${reportPath}`]
  const result = await run(process.execPath, [vitest, 'run', ...reporters, ...args], {
    env: environment,
    show: true,
  })
  return countTests(readReport(), result.code)
}

function readReport() {
  try {
    return JSON.parse(readFileSync(reportPath, 'utf8'))
  } catch (error) {
    if (error.code === 'ENOENT') return null
    throw error
  }
}

/** False when the arguments choose projects or files, and the journeys are not among them. */
function wantsJourneys(args) {
  const projects = args.flatMap((arg, index) => {
    if (arg === '--project') return [args[index + 1] ?? '']
    return arg.startsWith('--project=') ? [arg.slice('--project='.length)] : []
  })
  const files = args.filter((arg) => arg.startsWith('tests/'))
  if (projects.length > 0 && !projects.some((name) => /journeys|[*!]/.test(name))) return false
  return (
    files.length === 0 ||
    files.some((path) => 'tests/journeys/'.startsWith(path) || path.startsWith('tests/journeys'))
  )
}
