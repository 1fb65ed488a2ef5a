import { existsSync } from 'node:fs'
import { dirname } from 'node:path'
import { isRoot } from './paths.mjs'
import { withLock } from './lock.mjs'
import { run, tail } from './run.mjs'
import { say, SetupError } from './say.mjs'

// Debian's PostgreSQL package makes and starts a cluster on port 5432 of its own accord. We want the programs
// only, so the package is told not to, for the length of this installation.
const QUIET_CLUSTER = '/etc/postgresql-common/createcluster.d/emberstave.conf'

/**
 * Installs packages of Debian: as root, or through sudo where it asks no password; otherwise says exactly what
 * to type.
 *
 * @param {string[]} packages
 * @param {string} why ends the sentence “… is not installed”
 */
export async function installDebianPackages(packages, why) {
  const byHand = `sudo apt-get update && sudo apt-get install -y ${packages.join(' ')}`
  if (!existsSync('/usr/bin/apt-get')) {
    throw new SetupError(
      `${why} is not installed, and this is no Debian that could install it.`,
      `Install ${why} yourself, then run this again.`,
    )
  }
  if (!isRoot && (await run('sudo', ['-n', 'true'])).code !== 0) {
    throw new SetupError(
      `${why} is not installed, and this user may not install it.`,
      `Type this (as root without the sudo), then run the command again:\n${byHand}`,
    )
  }
  say(`installing ${why} from Debian's packages (once; a minute or two)`)
  const command = ['env', 'DEBIAN_FRONTEND=noninteractive', 'sh', '-c', installScript(packages)]
  const [file, ...args] = isRoot ? command : ['sudo', '-n', ...command]
  const result = await withLock('apt', () => run(file, args), { scope: 'machine' })
  if (result.code !== 0) {
    throw new SetupError(
      `${why} could not be installed from Debian's packages.`,
      `${tail(result.stderr || result.stdout)}\nCheck the network and /etc/apt/sources.list, or type this yourself:\n${byHand}`,
    )
  }
}

function installScript(packages) {
  const withoutCluster = [
    `mkdir -p ${dirname(QUIET_CLUSTER)}`,
    `printf 'create_main_cluster = false\n' > ${QUIET_CLUSTER}`,
    `trap 'rm -f ${QUIET_CLUSTER}' EXIT`,
  ]
  return [
    'set -e',
    ...(packages.includes('postgresql') ? withoutCluster : []),
    // A list that is too old names files that are gone: ask for fresh ones, and go on with the old when offline.
    'apt-get -q update || true',
    `apt-get -q -y -o DPkg::Lock::Timeout=600 install --no-install-recommends ${packages.join(' ')}`,
  ].join('\n')
}
