import { spawn } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { createBootClock } from '@/lib/gateway/boot-clock'
import { runCommand } from '@/lib/gateway/command'
import { gatewayConfigSchema } from '@/lib/gateway/config'
import { createProgramLog } from '@/lib/gateway/program-log'
import { readConfig } from '@/lib/gateway/read-config'
import { runGateway } from '@/lib/gateway/run-gateway'
import { startSimulatedModule, type SimulatedModule } from '@/simulators/modbus/simulated-module'
import { startIngestServer } from '@/tests/support/ingest-server'
import { until } from '@/tests/support/until'

/* The program as it is started on a box: a process of its own, a real module on a socket, an HTTP server that answers. */

const root = fileURLToPath(new URL('../../', import.meta.url))
const PROBE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a01'
const GATEWAY_ID = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8aff'
const TOKEN = 'emb_a-token-that-no-log-may-show'

let folder = ''
const endings: (() => Promise<unknown> | unknown)[] = []
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'emberstave-program-'))
})
afterEach(async () => {
  for (const end of endings.splice(0).reverse()) await end()
  rmSync(folder, { recursive: true })
})

/** A server that knows one code. */
async function startServer() {
  const server = await startIngestServer((body) =>
    JSON.stringify(body) === JSON.stringify({ code: 'EMBER-4711', name: 'box' })
      ? { status: 201, body: { token: TOKEN, gatewayId: GATEWAY_ID, gatewayName: 'Box by the window' } }
      : { status: 422, body: { title: 'Not valid', status: 422, detail: 'This code is not good any more.' } },
  )
  endings.push(server.close)
  return server
}

function channelsOf() {
  return [
    {
      probeId: PROBE,
      label: 'lead',
      kind: 'temperature',
      table: 'input',
      address: 0,
      type: 'int16',
      scale: 0.1,
      errorCodes: [{ raw: 32_767, means: 'open' }],
    },
  ]
}

async function startModule(): Promise<SimulatedModule> {
  const module = { name: 'Box', host: '127.0.0.1', port: 1, channels: channelsOf() }
  const config = gatewayConfigSchema.shape.modules.element.parse(module)
  const simulated = await startSimulatedModule({ config })
  endings.push(simulated.close)
  simulated.show(new Map([[PROBE, { tempC: 151.5 }]]))
  return simulated
}

function writeConfig(serverUrl: string, port: number, change: object = {}): string {
  const path = join(folder, 'gateway.json')
  const config = {
    server: serverUrl,
    tokenFile: 'token',
    spool: { folder: 'spool' },
    pollIntervalMs: 100,
    modules: [{ name: 'Box', host: '127.0.0.1', port, timeoutMs: 300, channels: channelsOf() }],
    ...change,
  }
  writeFileSync(path, JSON.stringify(config))
  return path
}

function writeToken(token = TOKEN) {
  writeFileSync(join(folder, 'token'), `${token}\n`, { mode: 0o600 })
}

function startProgram(...args: string[]) {
  const child = spawn(process.execPath, ['--import', 'tsx', 'lib/gateway/main.ts', ...args], {
    cwd: root,
    env: { PATH: process.env['PATH'], NODE_ENV: process.env.NODE_ENV },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let text = ''
  for (const stream of [child.stdout, child.stderr])
    stream.on('data', (part: Buffer) => (text += part.toString()))
  const ended = new Promise<number | null>((resolve) => child.on('close', (code) => resolve(code)))
  endings.push(() => {
    child.kill('SIGKILL')
    return ended
  })
  return { child, ended, text: () => text }
}

/** A command in this process, which ends at once when it would run on. */
async function command(...args: string[]) {
  const lines: string[] = []
  const print = (line: string) => void lines.push(line)
  const status = await runCommand(args, { print, printError: print, untilEnded: () => Promise.resolve() })
  return { status, text: lines.join('\n') }
}

describe('the gateway program', () => {
  it('reads, sends with its status, ends on SIGTERM with everything sent, and shows its token nowhere', async () => {
    const server = await startServer()
    const module = await startModule()
    writeToken()
    const program = startProgram(writeConfig(server.url, module.port))
    const readings = () => server.messages.flatMap((message) => message.readings)
    await until(() => readings().length >= 10)
    module.show(new Map([[PROBE, { flag: 'open' }]]))
    await until(() => readings().some(({ flag }) => flag === 'open'))
    program.child.kill('SIGTERM')
    expect(await program.ended).toBe(0)
    expect(program.text()).toContain('Ended. Everything was sent.')

    expect(readings().map(({ seq }) => seq)).toEqual(readings().map((_, i) => i + 1))
    expect(readings()[0]).toMatchObject({ probeId: PROBE, tempC: 151.5 })
    const times = readings().map(({ at }) => Date.parse(at))
    expect(times).toEqual([...times].sort((a, b) => a - b))
    expect(Math.abs(Date.now() - (times.at(-1) ?? 0))).toBeLessThan(5_000)
    expect(server.messages[0]?.status).toMatchObject({ programVersion: '0.1.0', uptimeS: expect.any(Number) })
    expect(server.messages.filter(({ status }) => status !== undefined).length).toBeLessThan(3)
    expect(new Set(server.authorizations)).toEqual(new Set([`Bearer ${TOKEN}`]))
    expect(program.text()).not.toContain(TOKEN)
  })

  it('keeps on disk what the server does not take, through a refused token and kill −9, and sends it at the next start', async () => {
    const server = await startServer()
    const module = await startModule()
    writeToken()
    server.answerWith(401)
    const path = writeConfig(server.url, module.port)
    const first = startProgram(path)
    await until(() => first.text().includes("refuses this gateway's token"))
    // It goes on reading: three more seconds would be 30; a handful is enough to show that.
    const requests = module.requestCount()
    await until(() => module.requestCount() > requests + 8)
    first.child.kill('SIGKILL')
    await first.ended
    const taken = module.requestCount()

    server.answerWith(200)
    const second = startProgram(path)
    await until(() => second.text().includes('of earlier runs wait in the spool'))
    await until(() => server.messages.length > 1)
    second.child.kill('SIGTERM')
    expect(await second.ended).toBe(0)
    const [boot, next] = [...server.kept.values()]
    // At most the reading under way was not on disk yet.
    expect(boot?.size).toBeGreaterThanOrEqual(taken - 1)
    expect([...(boot ?? [])]).toEqual(Array.from({ length: boot?.size ?? 0 }, (_, i) => i + 1))
    expect(next?.size).toBeGreaterThan(0)
    expect(server.authorizations.length).toBeLessThan(12)
  })

  it('a clock that is set while it runs moves what is unsent and the sending alike, and is said', async () => {
    const server = await startServer()
    const module = await startModule()
    writeToken()
    let aheadMs = -50 * 365 * 86_400_000
    const bootClock = createBootClock({ wallMs: () => Date.now() + aheadMs })
    const lines: string[] = []
    server.answerWith(503)
    const config = readConfig(writeConfig(server.url, module.port))
    const log = createProgramLog((line) => lines.push(line))
    const gateway = await runGateway(config, log, bootClock)
    endings.push(gateway.stop)
    // Read while the box believes that it is half a century ago.
    await until(() => module.requestCount() >= 5)
    aheadMs = 0
    await until(() => lines.some((line) => line.includes('clock was set forward by')))
    server.answerWith(200)
    await until(() => server.messages.flatMap((message) => message.readings).length >= 10)
    const readings = server.messages.flatMap((message) => message.readings)
    const times = readings.map(({ at }) => Date.parse(at))
    expect(times).toEqual([...times].sort((a, b) => a - b))
    expect(readings.map(({ seq }) => seq)).toEqual(readings.map((_, i) => i + 1))
    for (const at of [...times, ...server.messages.map((message) => Date.parse(message.sentAt))]) {
      expect(Math.abs(Date.now() - at)).toBeLessThan(60_000)
    }
  })

  it('a second program does not touch the spool of the first', async () => {
    const module = await startModule()
    writeToken()
    const path = writeConfig('http://127.0.0.1:9', module.port)
    let end = () => {}
    let isReading = false
    const first = runCommand([path], {
      print: (line) => (isReading ||= line.includes('channels on 1 modules')),
      printError: () => {},
      untilEnded: () => new Promise<void>((resolve) => (end = resolve)),
    })
    await until(() => isReading)
    expect(await command(path)).toMatchObject({
      status: 1,
      text: expect.stringContaining('Another gateway program is using the spool folder'),
    })
    end()
    expect(await first).toBe(0)
  })

  it('--check reads every channel once and prints what it found', async () => {
    const module = await startModule()
    const path = writeConfig('http://127.0.0.1:9', module.port)
    const { status, text } = await command(path, '--check')
    expect(text).toMatch(/^module +channel +register +reads\nBox +lead +input 0 int16 +151\.50 °C\n/)
    expect(text).toContain('The token file cannot be read')
    expect(status).toBe(0)
    expect(module.requestCount()).toBe(1)

    await module.behave({ kind: 'off' })
    const silent = await command(path, '--check')
    expect(silent.status).toBe(1)
    expect(silent.text).toContain('no reading: fault')
    expect(silent.text).toMatch(/Box \(127\.0\.0\.1:\d+, unit 1\) does not answer/)
  })

  it('a configuration that does not fit is refused with the field, a command that makes no sense with the usage', async () => {
    const unfit = await command(writeConfig('nowhere', 1, { pollIntervalMs: 1 }))
    expect(unfit.status).toBe(1)
    expect(unfit.text).toContain('  server: Give the address of the server')
    expect(unfit.text).toContain('  pollIntervalMs: ')
    expect(await command()).toMatchObject({
      status: 2,
      text: expect.stringContaining('Name the configuration'),
    })
    expect(await command('--chek')).toMatchObject({
      status: 2,
      text: expect.stringContaining('npm run gateway'),
    })
    expect(await command('enrol')).toMatchObject({ status: 2, text: expect.stringContaining('--code CODE') })
  })

  it('without a token it says where one comes from', async () => {
    const { status, text } = await command(writeConfig('http://127.0.0.1:9', 1))
    expect(status).toBe(1)
    expect(text).toContain('Enrol this gateway with a code')
    writeFileSync(join(folder, 'token'), 'two words')
    expect((await command(join(folder, 'gateway.json'))).text).toContain('holds no device token')
  })

  it('--print-schema prints a JSON Schema', async () => {
    const { status, text } = await command('--print-schema')
    expect(status).toBe(0)
    expect(JSON.parse(text)).toMatchObject({ type: 'object', additionalProperties: false })
  })
})

describe('enrolling', () => {
  it('trades the code for a token that only its owner can read, and shows it nowhere', async () => {
    const server = await startServer()
    const path = join(folder, 'gateway.json')
    writeFileSync(path, JSON.stringify({ tokenFile: 'secret/token' }))
    const args = ['--server', server.url, '--code', 'EMBER-4711', '--name', 'box', '--config', path]
    const { status, text } = await command('enrol', ...args)
    const tokenPath = join(folder, 'secret/token')
    expect(readFileSync(tokenPath, 'utf8')).toBe(`${TOKEN}\n`)
    expect(statSync(tokenPath).mode & 0o777).toBe(0o600)
    expect(status).toBe(0)
    expect(text).toContain('This box is now the gateway "Box by the window".')
    expect(text).not.toContain(TOKEN)
    expect(text).not.toContain('EMBER-4711')
  })

  it('a code that is not taken leaves the token that is there as it was', async () => {
    const server = await startServer()
    const path = writeConfig(server.url, 1)
    writeToken('emb_before')
    const refused = await command('enrol', '--code', 'WRONG', '--config', path)
    expect(refused.status).toBe(1)
    expect(refused.text).toContain('did not enrol this gateway: This code is not good any more.')
    expect(readFileSync(join(folder, 'token'), 'utf8')).toBe('emb_before\n')
    const nobody = await command('enrol', '--server', 'http://127.0.0.1:9', '--code', 'X', '--config', path)
    expect(nobody.status).toBe(1)
    expect(nobody.text).toContain('http://127.0.0.1:9 cannot be reached')
    const strange = await command('enrol', '--server', `${server.url}/api`, '--code', 'X', '--config', path)
    expect(strange.status).toBe(1)
  })
})
