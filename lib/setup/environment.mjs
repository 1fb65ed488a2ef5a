import { join } from 'node:path'
import { dataDir } from './paths.mjs'
import { lastPort } from './ports.mjs'
import { databaseUrl } from './postgres.mjs'
import { secrets } from './secrets.mjs'

export const DATABASE = 'emberstave'
/** What the ports of the mail simulator are remembered by. */
export const MAIL_SMTP = 'mail-smtp'
export const MAIL_PAGE = 'mail-page'
/** The same of the files simulator, and where it keeps what was put there. */
export const FILES = 'files'
export const FILES_DIR = join(dataDir, 'files')
export const DEMO_FILE = join(dataDir, 'demo.json')
export const SPOOL_DIR = join(dataDir, 'spool')

/**
 * What this clone's own server, seed and simulators are told, everything on this machine's loopback. The owner's
 * address of the database is not in it: only migrations and seeds get that (`withOwner`).
 *
 * @param {{ cluster: import('./postgres.mjs').Cluster, port: number, mode: 'demo' | 'dev' }} known
 */
export async function localEnvironment({ cluster, port, mode }) {
  const { sessionSecret, filesSecret } = await secrets(['sessionSecret', 'filesSecret'])
  const smtpPort = lastPort(MAIL_SMTP)
  const pagePort = lastPort(MAIL_PAGE)
  const filesPort = lastPort(FILES)
  return {
    ...process.env,
    NODE_ENV: mode === 'dev' ? 'development' : 'production',
    EMBERSTAVE_MODE: mode,
    PORT: String(port),
    APP_ORIGIN: process.env.APP_ORIGIN ?? `http://localhost:${port}`,
    DATABASE_URL: databaseUrl(cluster, 'app', DATABASE),
    SESSION_SECRET: sessionSecret,
    SMTP_URL: `smtp://127.0.0.1:${smtpPort}`,
    MAIL_FROM: 'Emberstave <emberstave@localhost>',
    MAIL_PAGE_URL: `http://localhost:${pagePort}`,
    MAIL_SMTP_PORT: String(smtpPort),
    MAIL_PAGE_PORT: String(pagePort),
    FILES_PORT: String(filesPort),
    S3_ENDPOINT: `http://127.0.0.1:${filesPort}`,
    S3_REGION: 'us-east-1',
    S3_BUCKET: 'emberstave',
    S3_ACCESS_KEY_ID: 'emberstave',
    S3_SECRET_ACCESS_KEY: filesSecret,
    DATA_DIR: dataDir,
    DEMO_FILE,
    SPOOL_DIR,
    SERVER_URL: `http://127.0.0.1:${port}`,
    LOG_LEVEL: process.env.LOG_LEVEL ?? (mode === 'dev' ? 'info' : 'warn'),
    NEXT_TELEMETRY_DISABLED: '1',
  }
}

/** The same for migrations and seeds, which work as the database's owner where they must. */
export function withOwner(environment, cluster) {
  return { ...environment, DATABASE_OWNER_URL: databaseUrl(cluster, 'owner', DATABASE) }
}
