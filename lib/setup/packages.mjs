import { createHash } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { root } from './paths.mjs'
import { withLock } from './lock.mjs'
import { run } from './run.mjs'
import { say, SetupError } from './say.mjs'

const lockPath = join(root, 'package-lock.json')
const folder = join(root, 'node_modules')
// Beside what it describes, so that removing node_modules removes it too.
const marker = join(folder, '.emberstave-installed')

/** Refuses a Node that the packages do not run on, before anything obscure happens. */
export function checkNode() {
  const wanted = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')).engines.node
  if (isWithin(process.versions.node, wanted)) return
  throw new SetupError(
    `Node ${process.versions.node} is not supported: this needs ${wanted}.`,
    'Install Node 20.19 or a later 20, 22.13 or a later 22, or 24 or newer.',
  )
}

/**
 * Whether a version is in a range such as `^20.19.0 || >=24.0.0`: those two forms, which package.json keeps to,
 * since no package can be asked before the packages are there.
 */
export function isWithin(version, range) {
  const have = version.split('.').map(Number)
  return range.split('||').some((part) => {
    const form = /^\s*(\^|>=)(\d+)\.(\d+)\.(\d+)\s*$/.exec(part)
    if (!form) throw new Error(`engines.node in package.json has a form that set-up does not read: ${part}`)
    const from = form.slice(2).map(Number)
    const differing = from.findIndex((number, index) => number !== have[index])
    const isLater = differing < 0 || have[differing] > from[differing]
    return isLater && (form[1] === '>=' || have[0] === from[0])
  })
}

/** Installs the packages of package-lock.json when they are not there, or not those. */
export async function ensurePackages() {
  checkNode()
  await withLock('packages', async () => {
    const wanted = `${createHash('sha256').update(readFileSync(lockPath)).digest('hex')} ${process.platform} ${process.arch}`
    if (existsSync(marker) && readFileSync(marker, 'utf8') === wanted) return
    if (!installedAsLocked()) await install()
    writeFileSync(marker, wanted)
  })
}

/** True when npm's own record of what it installed says the versions of the lockfile: after `npm install`, say. */
function installedAsLocked() {
  const record = join(folder, '.package-lock.json')
  if (!existsSync(record)) return false
  const installed = JSON.parse(readFileSync(record, 'utf8')).packages
  const locked = Object.entries(JSON.parse(readFileSync(lockPath, 'utf8')).packages)
  return locked.every(([path, one]) => {
    if (path === '') return true
    // A package for another platform is locked, and rightly absent.
    return installed[path] ? installed[path].version === one.version : one.optional === true
  })
}

async function install() {
  say('installing the packages (npm ci; a minute or two)')
  const npm = process.env.npm_execpath?.endsWith('.js')
    ? [process.execPath, process.env.npm_execpath]
    : ['npm']
  const args = [
    ...npm.slice(1),
    'ci',
    '--include=dev',
    '--include=optional',
    '--no-audit',
    '--no-fund',
    '--loglevel=error',
  ]
  const result = await run(npm[0], args, { show: true })
  if (result.code !== 0) {
    throw new SetupError(
      'The packages could not be installed.',
      'Read npm’s message above. Most often the network or the registry (npm config get registry) cannot be reached.',
    )
  }
}
