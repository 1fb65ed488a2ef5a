import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod'
import { gatewayConfigJsonSchema } from '@/lib/gateway/config'
import { readConfig, readEnrolConfig } from '@/lib/gateway/read-config'

const PROBES = [
  '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9b',
  '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9c',
  '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9d',
] as const

let folder = ''
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'emberstave-config-'))
})
afterAll(() => rmSync(folder, { recursive: true }))

const channel = {
  probeId: PROBES[0],
  table: 'input',
  address: 0,
  type: 'int16',
  kind: 'temperature',
  scale: 0.1,
}
const microvolts = {
  probeId: PROBES[1],
  table: 'input',
  address: 10,
  type: 'int32',
  wordOrder: 'mixed',
  kind: 'microvolts',
  scale: 0.1,
  coldJunction: { table: 'input', address: 20, type: 'int16', scale: 0.01 },
  errorCodes: [{ raw: 2_147_483_647, means: 'open' }],
}
const module = { name: 'Hearth 1', host: '192.168.1.50', channels: [channel, microvolts] }
const config = {
  server: 'https://toasting.example',
  tokenFile: 'token',
  spool: { folder: 'spool' },
  modules: [module],
}

function read(content: unknown) {
  const path = join(folder, 'gateway.json')
  writeFileSync(path, typeof content === 'string' ? content : JSON.stringify(content))
  return readConfig(path)
}

function withChannel(change: object) {
  return { ...config, modules: [{ ...module, channels: [{ ...channel, ...change }] }] }
}

describe('the configuration', () => {
  it('fills in what is usual and finds its files beside itself', () => {
    const parsed = read(config)
    expect(parsed.tokenFile).toBe(join(folder, 'token'))
    expect(parsed.spool).toEqual({ folder: join(folder, 'spool'), mostMegabytes: 256 })
    expect(parsed.pollIntervalMs).toBe(200)
    expect(parsed.modules[0]).toMatchObject({ port: 502, unitId: 1, timeoutMs: 1_000, mostGapRegisters: 0 })
    expect(parsed.modules[0]?.channels[0]).toMatchObject({ wordOrder: 'big', offset: 0, errorCodes: [] })
  })

  const refusals: [what: string, content: unknown, field: string, says: string][] = [
    ['no JSON', '{', '', 'is not JSON'],
    ['an unknown field', { ...config, sever: 'x' }, 'sever', 'there is no such field'],
    ['a server that is no address', { ...config, server: 'toasting' }, 'server', 'https://'],
    ['another protocol', { ...config, server: 'ftp://toasting.example' }, 'server', 'https://'],
    ['no token at all', { ...config, tokenFile: undefined }, 'tokenFile', 'either'],
    ['the token itself', { ...config, token: 'emb_x' }, 'token', 'there is no such field'],
    ['two ways to the token', { ...config, tokenVariable: 'TOKEN' }, 'tokenFile', 'either'],
    ['no modules', { ...config, modules: [] }, 'modules', '1'],
    ['too fast a poll', { ...config, pollIntervalMs: 5 }, 'pollIntervalMs', '50'],
    [
      'an address with a scheme',
      { ...config, modules: [{ ...module, host: 'http://x' }] },
      'modules[0].host',
      'host name',
    ],
    [
      'two modules of one name',
      {
        ...config,
        modules: [
          { ...module, channels: [channel] },
          { ...module, channels: [microvolts] },
        ],
      },
      'modules[1].name',
      'Two modules',
    ],
    [
      'a probe read twice',
      { ...config, modules: [module, { ...module, name: 'B', channels: [channel] }] },
      'modules[1].channels[0].probeId',
      'read by "Hearth 1", channel 0 already',
    ],
    ['a probe id that is none', withChannel({ probeId: 'lead' }), 'modules[0].channels[0].probeId', 'GUID'],
    ['an unknown kind', withChannel({ kind: 'volts' }), 'modules[0].channels[0].kind', ''],
    ['an unknown type', withChannel({ type: 'int64' }), 'modules[0].channels[0].type', 'int16'],
    ['a scale of nought', withChannel({ scale: 0 }), 'modules[0].channels[0].scale', 'every value the same'],
    [
      'a manual’s register number',
      withChannel({ address: 300_001 }),
      'modules[0].channels[0].address',
      '65535',
    ],
    [
      'a pair behind the last register',
      withChannel({ address: 65_535, type: 'int32' }),
      'modules[0].channels[0].address',
      'behind the last register',
    ],
    [
      'an error code that the type cannot hold',
      withChannel({ errorCodes: [{ raw: 65_535, means: 'open' }] }),
      'modules[0].channels[0].errorCodes[0].raw',
      'never holds this',
    ],
    [
      'a range that runs backwards',
      withChannel({ errorCodes: [{ from: 10, to: 9, means: 'open' }] }),
      'modules[0].channels[0].errorCodes[0].to',
      'before its start',
    ],
    [
      'an error code without its meaning',
      withChannel({ errorCodes: [{ raw: 1 }] }),
      'modules[0].channels[0].errorCodes[0].means',
      '',
    ],
    [
      'a bit that a register has not',
      withChannel({ status: { table: 'input', address: 5, bits: [{ bit: 16, means: 'open' }] } }),
      'modules[0].channels[0].status.bits[0].bit',
      '15',
    ],
    [
      'microvolts without a cold junction',
      withChannel({ kind: 'microvolts' }),
      'modules[0].channels[0].coldJunction',
      '',
    ],
    [
      'a cold junction with an unknown type',
      withChannel({ kind: 'microvolts', coldJunction: { table: 'input', address: 3, type: 'x' } }),
      'modules[0].channels[0].coldJunction.type',
      'int16',
    ],
    [
      'numbers that cover half of one another',
      { ...config, modules: [{ ...module, channels: [microvolts, { ...channel, address: 11 }] }] },
      'modules[0].channels[1].address',
      "another number's",
    ],
  ]

  it.each(refusals)('%s is refused, and the field named', (_what, content, field, says) => {
    let sentence = ''
    try {
      read(content)
    } catch (error) {
      sentence = error instanceof Error ? error.message : String(error)
    }
    expect(sentence).toContain(field === '' ? '' : `  ${field}: `)
    expect(sentence).toContain(says)
    expect(sentence).toContain('gateway.json')
  })

  it('a status register and a cold junction may serve several channels', () => {
    const status = { table: 'input', address: 21, bits: [{ bit: 0, means: 'open' }] }
    const channels = PROBES.map((probeId, i) => ({ ...microvolts, probeId, address: 10 + 2 * i, status }))
    expect(read({ ...config, modules: [{ ...module, channels }] }).modules[0]?.channels).toHaveLength(3)
  })

  it('is described by a JSON Schema that asks for the same fields', () => {
    const schema = z
      .looseObject({
        type: z.literal('object'),
        additionalProperties: z.literal(false),
        required: z.array(z.string()),
        properties: z.record(z.string(), z.unknown()),
      })
      .parse(gatewayConfigJsonSchema())
    expect(schema.required.sort()).toEqual(['modules', 'server', 'spool'])
    expect(Object.keys(schema.properties).sort()).toEqual([
      'modules',
      'pollIntervalMs',
      'server',
      'spool',
      'tokenFile',
      'tokenVariable',
    ])
  })

  it('enrolling needs no modules yet, but a place for the token', () => {
    const path = join(folder, 'enrol.json')
    writeFileSync(path, JSON.stringify({ server: config.server, tokenFile: 'secret/token' }))
    expect(readEnrolConfig(path)).toEqual({ server: config.server, tokenFile: join(folder, 'secret/token') })
    writeFileSync(path, JSON.stringify({ server: config.server }))
    expect(() => readEnrolConfig(path)).toThrow('tokenFile: Name the file')
  })
})
