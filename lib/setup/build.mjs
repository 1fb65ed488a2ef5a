import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { keep, readKept } from './kept.mjs'
import { lockHolder, withLock } from './lock.mjs'
import { root } from './paths.mjs'
import { run } from './run.mjs'
import { say, SetupError } from './say.mjs'

const FOLDERS = ['app', 'components', 'entities', 'lib', 'migrations', 'public']
const LOOSE = /\.(ts|tsx|mjs|cjs|js|json)$/
// They stand in the root or in lib, and no page is made of them.
const LEFT_OUT = /^(lib\/setup\/|server\.ts$|vitest\.config\.ts$|eslint\.config\.mjs$|next-env\.d\.ts$|\.)/
const RECORD = 'build.json'

/**
 * Runs `next build` when the sources have changed since the last one, or it did not finish.
 *
 * @param {string} command who asks, for the message
 */
export async function ensureBuild(command) {
  await withLock('build', async () => {
    const sources = sourcesHash()
    const last = readKept(RECORD, null)
    if (last?.sources === sources && last.buildId === buildId()) return
    const server = await lockHolder('app')
    if (server && server.pid !== process.pid && !server.what.includes('dev')) {
      throw new SetupError(
        `${command} has to build the changed sources, but ${server.what} (process ${server.pid}) serves the present build.`,
        'Stop it with Ctrl-C first, or run this from a second clone.',
      )
    }
    say('building the pages (next build; a minute or two)')
    // Forgotten first: a build that breaks off is never taken for a whole one.
    keep(RECORD, null)
    const next = join(root, 'node_modules', 'next', 'dist', 'bin', 'next')
    const env = { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' }
    const result = await run(process.execPath, [next, 'build'], { env, show: true })
    if (result.code !== 0) throw new SetupError('The pages could not be built.', 'Read Next’s message above.')
    keep(RECORD, { sources, buildId: buildId() })
  })
}

function buildId() {
  const path = join(root, '.next', 'BUILD_ID')
  return existsSync(path) ? readFileSync(path, 'utf8') : null
}

/** One hash over everything that a built page is made of, and over what builds it. */
function sourcesHash() {
  const loose = readdirSync(root, { withFileTypes: true }).filter(
    (one) => one.isFile() && LOOSE.test(one.name),
  )
  const deep = FOLDERS.filter((name) => existsSync(join(root, name))).flatMap((name) =>
    readdirSync(join(root, name), { recursive: true, withFileTypes: true })
      .filter((one) => one.isFile())
      .map((one) => join(one.parentPath, one.name).slice(root.length + 1)),
  )
  const files = [...loose.map((one) => one.name), ...deep].filter((path) => !LEFT_OUT.test(path)).sort()
  const hash = createHash('sha256').update(process.versions.node)
  for (const [name, value] of Object.entries(process.env).sort()) {
    if (name.startsWith('NEXT_PUBLIC_')) hash.update(`${name}=${value}\0`)
  }
  for (const file of files)
    hash
      .update(`${file}\0`)
      .update(readFileSync(join(root, file)))
      .update('\0')
  return hash.digest('hex')
}
