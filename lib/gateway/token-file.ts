import {
  chmodSync,
  closeSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeSync,
} from 'node:fs'
import { dirname } from 'node:path'
import type { GatewayConfig } from './config'
import { GatewayError } from './gateway-error'

/** The device token from where the configuration says it is. @throws GatewayError when it is not there */
export function readToken(config: Pick<GatewayConfig, 'tokenFile' | 'tokenVariable'>): string {
  if (config.tokenVariable !== undefined) {
    const token = process.env[config.tokenVariable]?.trim()
    if (token) return checkedToken(token, `The environment variable ${config.tokenVariable}`)
    throw new GatewayError(`The environment variable ${config.tokenVariable} (tokenVariable) is not set.`)
  }
  const path = config.tokenFile ?? ''
  try {
    return checkedToken(readFileSync(path, 'utf8').trim(), `The token file ${path}`)
  } catch (error) {
    if (error instanceof GatewayError) throw error
    const reason = error instanceof Error ? error.message : String(error)
    throw new GatewayError(
      `The token file cannot be read (tokenFile: ${reason}). ` +
        'Enrol this gateway with a code: npm run gateway -- enrol --code CODE --config FILE',
    )
  }
}

/** True when others than its owner may read the file. */
export function isTokenFileOpenToOthers(path: string): boolean {
  return (statSync(path).mode & 0o077) !== 0
}

/** Puts the token in place whole or not at all; only the owner may read it. */
export function writeTokenFile(path: string, token: string): void {
  mkdirSync(dirname(path), { recursive: true })
  const part = `${path}.new`
  rmSync(part, { force: true })
  const file = openSync(part, 'wx', 0o600)
  try {
    writeSync(file, `${token}\n`)
    fsyncSync(file)
  } finally {
    closeSync(file)
  }
  chmodSync(part, 0o600)
  renameSync(part, path)
}

/** What can stand in an Authorization header. */
function checkedToken(token: string, where: string): string {
  if (/^[\x21-\x7e]{1,200}$/.test(token)) return token
  throw new GatewayError(`${where} holds no device token: a token is one line without spaces.`)
}
