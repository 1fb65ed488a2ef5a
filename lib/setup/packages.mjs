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
  const [major, minor] = process.versions.node.split('.').map(Number)
  if ((major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22) return
  throw new SetupError(
    `Node ${process.versions.node} is not supported.`,
    'Use Node 20.19 or a later 20, or 22.12 or newer.',
  )
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
