import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { installDebianPackages } from './debian.mjs'
import { run } from './run.mjs'
import { SetupError } from './say.mjs'

const HOME = '/usr/lib/postgresql'
const OLDEST_MAJOR = 15

/** The installed versions, newest first: `{ major, bin }`. */
async function installed() {
  const majors = existsSync(HOME) ? readdirSync(HOME).filter((name) => /^\d+$/.test(name)) : []
  const found = majors.map((name) => ({ major: Number(name), bin: join(HOME, name, 'bin') }))
  const config = await run('pg_config', ['--bindir', '--version'])
  if (config.code === 0) {
    const [bin, version] = config.stdout.trim().split('\n')
    const major = Number(/PostgreSQL (\d+)/.exec(version ?? '')?.[1])
    if (!found.some((one) => one.major === major)) found.push({ major, bin })
  }
  return found
    .filter(({ bin }) =>
      ['initdb', 'pg_ctl', 'postgres', 'psql'].every((name) => existsSync(join(bin, name))),
    )
    .sort((a, b) => b.major - a.major)
}

/**
 * Finds PostgreSQL's server programs, installing Debian's package when there are none.
 *
 * @param {number | null} major the version that an existing cluster needs; null takes the newest
 * @returns {Promise<{ major: number, bin: string } | null>} null when a cluster's own version is gone
 */
export async function postgresPrograms(major = null) {
  const usable = () =>
    installed().then((all) =>
      all.find((one) => (major === null ? one.major >= OLDEST_MAJOR : one.major === major)),
    )
  const found = await usable()
  if (found) return found
  await installDebianPackages(['postgresql'], 'PostgreSQL')
  const fresh = await usable()
  if (fresh || major !== null) return fresh ?? null
  throw new SetupError(
    `Debian's package brought no PostgreSQL ${OLDEST_MAJOR} or newer.`,
    `Install PostgreSQL ${OLDEST_MAJOR} or newer under ${HOME}, then run this again.`,
  )
}
