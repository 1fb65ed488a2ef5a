import {
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs'
import { availableParallelism } from 'node:os'
import { join } from 'node:path'
import { whenEnding } from './ending.mjs'
import { ensurePackages } from './packages.mjs'
import { dataDir, makeDataDir, root } from './paths.mjs'
import { run, tail } from './run.mjs'
import { main, say, SetupError } from './say.mjs'

/**
 * `npm run test:planted`: plants the faults of tests/planted/faults.json one at a time into a copy of lib/science, runs
 * the laws of the copy (the tests named `law:`), and says which law caught each. The tree itself is never touched.
 */

const LIST = 'tests/planted/faults.json'
const LANES = Math.min(2, availableParallelism())

await main(async () => {
  await ensurePackages()
  const faults = chosenFaults(process.argv[2] ?? '')
  makeDataDir()
  const folder = mkdtempSync(join(dataDir, 'planted-'))
  const remove = () => rmSync(folder, { recursive: true, force: true })
  const forget = whenEnding(remove)
  try {
    return await plantAll(faults, folder)
  } finally {
    forget()
    remove()
  }
})

/** The listed faults whose name or file contains `wanted`, each checked against the source as it is now. */
function chosenFaults(wanted) {
  const all = JSON.parse(readFileSync(join(root, LIST), 'utf8'))
  for (const fault of all) plantedText(fault)
  const chosen = all.filter((fault) => `${fault.file} ${fault.name}`.includes(wanted))
  if (chosen.length === 0)
    throw new SetupError(`No planted fault has “${wanted}” in its name or file.`, `See ${LIST}.`)
  return chosen
}

/** The source with the fault in it; refuses when the text to change is not there exactly once. */
function plantedText({ file, name, from, to }) {
  const path = join(root, 'lib', 'science', file)
  const pieces = existsSync(path) ? readFileSync(path, 'utf8').split(from) : []
  if (pieces.length === 2) return pieces.join(to)
  throw new SetupError(
    `The fault “${name}” no longer fits: lib/science/${file} has its text ${Math.max(0, pieces.length - 1)} times and not once.`,
    `The text is: ${from}\nWrite the fault anew in ${LIST} against the source as it is now.`,
  )
}

async function plantAll(faults, folder) {
  const startedAt = Date.now()
  const lanes = Array.from({ length: LANES }, (_, i) => copyScience(join(folder, `lane-${i}`)))
  await provePlain(lanes[0], faults)
  const waiting = [...faults.entries()]
  const results = []
  await Promise.all(
    lanes.map(async (lane) => {
      for (let next = waiting.shift(); next !== undefined; next = waiting.shift()) {
        const [index, fault] = next
        results[index] = await plantOne(lane, fault)
        sayResult(fault, results[index])
      }
    }),
  )
  const missed = results.filter((caughtBy) => caughtBy === null).length
  const seconds = Math.round((Date.now() - startedAt) / 1000)
  say(`${faults.length - missed} of ${faults.length} planted faults caught by the laws, in ${seconds} s`)
  return missed > 0 ? 1 : 0
}

function sayResult({ kind, file, name }, caughtBy) {
  const verdict = caughtBy === null ? 'MISSED' : 'caught'
  process.stdout.write(`${verdict}  ${kind.padEnd(10)}  ${file}: ${name}\n`)
  if (caughtBy !== null) process.stdout.write(`        by ${caughtBy}\n`)
}

/** A copy of lib/science and of those of its tests that need nothing else, which vitest runs as a project of its own. */
function copyScience(lane) {
  mkdirSync(join(lane, 'lib'), { recursive: true })
  cpSync(join(root, 'lib', 'science'), join(lane, 'lib', 'science'), { recursive: true })
  cpSync(join(root, 'tests', 'science'), join(lane, 'tests', 'science'), { recursive: true })
  writeFileSync(join(lane, 'package.json'), '{ "type": "module" }\n')
  writeFileSync(
    join(lane, 'vitest.config.mjs'),
    `export default { test: { include: ['tests/science/**/*.test.ts'], pool: 'threads', isolate: false, maxWorkers: 1, testTimeout: 60000 } }\n`,
  )
  return lane
}

/** Test files of the lane with laws that import a module of lib/science: its own first, then the others. */
function lawFilesOf(lane, module) {
  const folder = join(lane, 'tests', 'science')
  const own = module.replace(/\.ts$/, '.test.ts')
  const files = readdirSync(folder).filter((name) => {
    if (!name.endsWith('.test.ts')) return false
    const text = readFileSync(join(folder, name), 'utf8')
    const imports = text.includes(`'../../lib/science/${module.replace(/\.ts$/, '')}'`)
    return imports && text.includes(`'law: `) && !text.includes(`from '@/`)
  })
  if (files.length === 0)
    throw new SetupError(`No test of a law imports lib/science/${module}.`, `See ${LIST}.`)
  return files.sort((a, b) => Number(b === own) - Number(a === own) || a.localeCompare(b))
}

/** Laws that fail before anything is planted would catch everything, and prove nothing. */
async function provePlain(lane, faults) {
  const files = new Set(faults.map((fault) => lawFilesOf(lane, fault.file)[0]))
  say(`first the laws of ${[...files].join(', ')}, with nothing planted`)
  const { failed, output } = await runLaws(lane, [...files])
  if (failed.length === 0) return
  throw new SetupError(
    `The laws do not hold before anything is planted: ${failed[0]}`,
    `Mend that first: npm test -- tests/science\n${tail(output, 6)}`,
  )
}

/** Plants one fault, runs the laws of its module until one fails, and takes it out again: that law, or null. */
async function plantOne(lane, fault) {
  const path = join(lane, 'lib', 'science', fault.file)
  const plain = readFileSync(path, 'utf8')
  writeFileSync(path, plantedText(fault))
  try {
    for (const file of lawFilesOf(lane, fault.file)) {
      const { failed } = await runLaws(lane, [file], '--bail=1')
      if (failed.length > 0) return `${file}, ${failed[0]}`
    }
    return null
  } finally {
    writeFileSync(path, plain)
  }
}

/** Runs the laws of some test files of a lane: the names of those that failed. */
async function runLaws(lane, files, ...more) {
  const reportPath = join(lane, 'report.json')
  rmSync(reportPath, { force: true })
  const vitest = join(root, 'node_modules', 'vitest', 'vitest.mjs')
  const chosen = ['--testNamePattern=law: ', '--reporter=json', `--outputFile=${reportPath}`, ...more]
  const paths = files.map((file) => `tests/science/${file}`)
  const result = await run(process.execPath, [vitest, 'run', '--root', lane, ...chosen, ...paths], {
    cwd: lane,
  })
  const output = result.stdout + result.stderr
  const report = existsSync(reportPath) ? JSON.parse(readFileSync(reportPath, 'utf8')) : { testResults: [] }
  const tests = report.testResults.flatMap(({ assertionResults }) => assertionResults)
  const broken = report.testResults.find(
    ({ status, assertionResults }) => status === 'failed' && !assertionResults.length,
  )
  if (broken || tests.every(({ status }) => status !== 'passed' && status !== 'failed')) {
    throw new SetupError(
      `The tests of ${files.join(', ')} could not be run.`,
      broken ? broken.message : tail(output, 12),
    )
  }
  return { failed: tests.filter(({ status }) => status === 'failed').map(({ title }) => title), output }
}
