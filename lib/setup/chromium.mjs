import { accessSync, constants } from 'node:fs'
import { installDebianPackages } from './debian.mjs'
import { SetupError } from './say.mjs'

const PLACES = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome']

function canRun(path) {
  try {
    accessSync(path, constants.X_OK)
    return true
  } catch {
    return false
  }
}

/**
 * The browser for the journeys: `CHROMIUM_PATH` when given, else the installed one, else Debian's, installed now.
 *
 * @returns {Promise<string>} its path
 */
export async function chromium() {
  const given = process.env.CHROMIUM_PATH
  if (given) {
    if (canRun(given)) return given
    throw new SetupError(`CHROMIUM_PATH is ${given}, which cannot be run.`, 'Correct it, or leave it out.')
  }
  const found = PLACES.find(canRun)
  if (found) return found
  await installDebianPackages(['chromium'], 'Chromium')
  const fresh = PLACES.find(canRun)
  if (fresh) return fresh
  throw new SetupError(
    'Debian’s package brought no Chromium.',
    'Install a Chromium and give its path in CHROMIUM_PATH.',
  )
}
