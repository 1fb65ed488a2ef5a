import { spawn } from 'node:child_process'
import { mkdtemp, rm } from 'node:fs/promises'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import type { Browser, Page } from 'playwright-core'
import { chromium } from 'playwright-core'
import { createTestDatabase } from '@/tests/support/database'

/** The built app as `npm start` runs it, on a database of its own. */
export type StartedApp = {
  origin: string
  /** Ends the server by the signal and starts it again on the same database; answers how long it took to be ready, ms. */
  restart: (signal: 'SIGTERM' | 'SIGKILL') => Promise<number>
  stop: () => Promise<void>
}

async function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.on('error', reject)
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address()
      probe.close(() => resolve(typeof address === 'object' && address !== null ? address.port : 0))
    })
  })
}

async function untilReady(origin: string, hasEnded: () => string | null): Promise<void> {
  for (const until = Date.now() + 120_000; Date.now() < until;) {
    const ended = hasEnded()
    if (ended !== null) throw new Error(`The server ended before it was ready:\n${ended}`)
    const answer = await fetch(`${origin}/api/health/ready`).catch(() => null)
    if (answer?.ok === true) return
    await sleep(200)
  }
  throw new Error('The server was not ready within two minutes.')
}

/**
 * Makes a database, points this process at it (so that `seed` may use the verbs), seeds it, and starts the server on
 * it. The pages must have been built; `npm test` does.
 */
export async function startApp(seed: (dataDir: string) => Promise<void>): Promise<StartedApp> {
  const database = await createTestDatabase()
  const port = await freePort()
  const origin = `http://127.0.0.1:${port}`
  const dataDir = await mkdtemp(join(tmpdir(), 'emberstave-journey-'))
  const environment = {
    DATABASE_URL: database.databaseUrl,
    SESSION_SECRET: 'a secret for tests only, of no worth anywhere',
    APP_ORIGIN: origin,
    PORT: String(port),
    EMBERSTAVE_MODE: 'test',
    DATA_DIR: dataDir,
    LOG_LEVEL: 'error',
    SMTP_URL: '',
  }
  Object.assign(process.env, environment)
  await seed(dataDir)
  let server = startServer(environment)
  const stop = async () => {
    await server.end('SIGTERM')
    await database.drop()
    await rm(dataDir, { recursive: true, force: true })
  }
  try {
    await untilReady(origin, server.endedWith)
  } catch (error) {
    await stop()
    throw error
  }
  return {
    origin,
    stop,
    restart: async (signal) => {
      await server.end(signal)
      const startedAt = performance.now()
      server = startServer(environment)
      await untilReady(origin, server.endedWith)
      return performance.now() - startedAt
    },
  }
}

/** The server as a child process; `endedWith` gives its output once it has ended, null before. */
function startServer(environment: Readonly<Record<string, string>>) {
  const child = spawn(process.execPath, ['--import', 'tsx', 'server.ts'], {
    env: { ...process.env, ...environment, NODE_ENV: 'production' },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let output = ''
  let isEnded = false
  for (const stream of [child.stdout, child.stderr])
    stream.on('data', (chunk: Buffer) => (output += chunk.toString()))
  child.on('exit', () => (isEnded = true))
  return {
    endedWith: () => (isEnded ? output : null),
    end: async (signal: 'SIGTERM' | 'SIGKILL') => {
      child.kill(signal)
      for (const until = Date.now() + 8_000; !isEnded && Date.now() < until;) await sleep(50)
      if (!isEnded) child.kill('SIGKILL')
    },
  }
}

export async function startBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env['CHROMIUM_PATH'] ?? '/usr/bin/chromium',
    args: [
      '--headless',
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  })
}

export type SignedIn = { page: Page; faults: string[] }

/** A browser context of one person, signed in by the sign-in page; collects page errors and CSP violations. */
export async function signIn(
  browser: Browser,
  origin: string,
  person: { email: string; password: string },
  size: { width: number; height: number },
): Promise<SignedIn> {
  const context = await browser.newContext({ viewport: size, baseURL: origin })
  const page = await context.newPage()
  const faults: string[] = []
  page.on('pageerror', (error) => faults.push(`page error: ${error.message}`))
  page.on('console', (message) => {
    if (message.type() === 'error' && !/Failed to load resource/.test(message.text()))
      faults.push(message.text())
  })
  await page.goto('/sign-in', { waitUntil: 'networkidle' })
  await page.getByLabel('E-mail').fill(person.email)
  await page.getByLabel('Password').fill(person.password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL((url) => url.pathname !== '/sign-in')
  return { page, faults }
}
