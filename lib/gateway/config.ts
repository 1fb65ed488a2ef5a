import * as z from 'zod'
import { MOST_REGISTERS_PER_READ, type RegisterSpan } from './poll-plan'
import { readingFlagSchema } from './protocol'
import { registerCount, registerRange, registerTypes, wordOrders } from './registers'

/*
 * The gateway program's configuration: where the server is, where readings are kept, and which registers of which
 * Modbus TCP modules hold which probe. The register map is data; no module's make is known to the program.
 */

const addressSchema = z
  .int()
  .min(0)
  .max(65_535)
  .describe('Protocol address, counted from 0: "30001" or "40001" in a manual is 0 here')

const registerShape = {
  table: z
    .enum(['input', 'holding'])
    .describe('Input registers (Modbus function 4) or holding registers (function 3)'),
  address: addressSchema,
  type: z.enum(registerTypes),
  wordOrder: z
    .enum(wordOrders)
    .default('big')
    .describe(
      'Bytes A B C D of a number lie as AB CD (big), DC BA (little), CD AB (mixed), BA DC (byte-swapped)',
    ),
}

const scaleSchema = z
  .number()
  .refine((scale) => scale !== 0 && Number.isFinite(scale), 'A scale of 0 would make every value the same')

/** A raw value, or a range of them with both ends, with which the module says that there is no reading. */
const errorCodeSchema = z
  .union([
    z.strictObject({ raw: z.number(), means: readingFlagSchema }),
    z.strictObject({ from: z.number(), to: z.number(), means: readingFlagSchema }),
  ])
  .describe('Compared with the number in the register, before scale and offset')

const statusSchema = z
  .strictObject({
    table: registerShape.table,
    address: addressSchema,
    bits: z
      .array(z.strictObject({ bit: z.int().min(0).max(15), means: readingFlagSchema }))
      .min(1)
      .max(16),
  })
  .describe('A register whose bits tell of faults; the first bit listed that is set counts')

const coldJunctionRegisterSchema = z.strictObject({
  ...registerShape,
  scale: scaleSchema.default(1).describe('°C for one step of the register'),
  offset: z.number().default(0).describe('°C, added after scaling'),
  errorCodes: z.array(errorCodeSchema).max(20).default([]),
})

const coldJunctionFixedSchema = z.strictObject({
  fixedC: z
    .number()
    .min(-60)
    .max(125)
    .describe('°C of a reference that is held there: an ice point or a block kept at temperature'),
})

const channelShape = {
  probeId: z.guid().describe('Id of the probe, as its page shows it'),
  label: z.string().trim().min(1).max(60).optional().describe('For the table of --check and the log'),
  ...registerShape,
  errorCodes: z.array(errorCodeSchema).max(20).default([]),
  status: statusSchema.optional(),
}

const temperatureChannelSchema = z.strictObject({
  ...channelShape,
  kind: z.literal('temperature').describe('The module converts by itself'),
  scale: scaleSchema.default(1).describe('°C for one step of the register'),
  offset: z
    .number()
    .default(0)
    .describe('°C, added after scaling: 32 °F steps want scale 5/9 and offset -17.78'),
})

const microvoltsChannelSchema = z.strictObject({
  ...channelShape,
  kind: z.literal('microvolts').describe('The module gives the voltage; the server converts'),
  scale: scaleSchema.default(1).describe('µV for one step of the register'),
  coldJunction: z.union([coldJunctionRegisterSchema, coldJunctionFixedSchema]),
})

const channelSchema = z
  .discriminatedUnion('kind', [temperatureChannelSchema, microvoltsChannelSchema])
  .superRefine((channel, context) => {
    checkRegister(channel, [], context)
    if (channel.kind === 'microvolts' && 'table' in channel.coldJunction) {
      checkRegister(channel.coldJunction, ['coldJunction'], context)
    }
  })

const moduleSchema = z
  .strictObject({
    name: z.string().trim().min(1).max(60),
    host: z
      .string()
      .trim()
      .regex(/^[\w.:-]+$/, 'Give a host name or an IP address, without http:// and without the port'),
    port: z.int().min(1).max(65_535).default(502),
    unitId: z.int().min(0).max(255).default(1),
    timeoutMs: z.int().min(50).max(10_000).default(1_000).describe('For one request, and for connecting'),
    mostRegistersPerRead: z
      .int()
      .min(2)
      .max(MOST_REGISTERS_PER_READ)
      .default(MOST_REGISTERS_PER_READ)
      .describe('Fewer where the module gives fewer at once'),
    mostGapRegisters: z
      .int()
      .min(0)
      .max(100)
      .default(0)
      .describe('Unused registers that may be read along to save a request; 0 where the module refuses them'),
    channels: z.array(channelSchema).min(1).max(64),
  })
  .superRefine((module, context) => {
    for (const [index, channel] of module.channels.entries()) {
      for (const span of spansOfChannel(channel)) {
        const other = module.channels.slice(0, index + 1).find((one) => overlapsPartly(span, one))
        if (other === undefined) continue
        context.addIssue({
          code: 'custom',
          path: ['channels', index, 'address'],
          message: `Registers ${printSpan(span)} cover half of another number's; check address and type`,
        })
        break
      }
    }
  })

export const gatewayConfigSchema = z
  .strictObject({
    server: z
      .url({
        protocol: /^https?$/,
        error: 'Give the address of the server, such as https://toasting.example',
      })
      .describe('Address of the server'),
    tokenFile: z
      .string()
      .min(1)
      .optional()
      .describe('File that holds the device token, relative to this file; `enrol` writes it'),
    tokenVariable: z
      .string()
      .regex(/^[A-Za-z_]\w*$/, 'Give the name of an environment variable, not the token itself')
      .optional()
      .describe('Name of the environment variable that holds the device token'),
    spool: z.strictObject({
      folder: z
        .string()
        .min(1)
        .describe('Folder for readings that were not acknowledged, relative to this file'),
      mostMegabytes: z.number().min(1).max(1_000_000).default(256),
    }),
    pollIntervalMs: z.int().min(50).max(60_000).default(200),
    modules: z.array(moduleSchema).min(1).max(32),
  })
  .superRefine((config, context) => {
    if ((config.tokenFile === undefined) === (config.tokenVariable === undefined)) {
      context.addIssue({
        code: 'custom',
        path: ['tokenFile'],
        message: 'Give either tokenFile or tokenVariable; the token itself does not belong in this file',
      })
    }
    checkRepeated(config.modules, context)
  })

export type GatewayConfig = z.infer<typeof gatewayConfigSchema>
export type ModuleConfig = GatewayConfig['modules'][number]
export type ChannelConfig = ModuleConfig['channels'][number]
export type ErrorCode = z.infer<typeof errorCodeSchema>

/** The parts that enrolling needs; the modules may still be missing. */
export const enrolConfigSchema = z.looseObject({
  server: gatewayConfigSchema.shape.server.optional(),
  tokenFile: z.string({ error: 'Name the file that is to hold the token, as "tokenFile"' }).min(1),
})

/** Every register that one channel needs: its own, its status and its cold junction. */
export function spansOfChannel(channel: z.infer<typeof channelSchema>): RegisterSpan[] {
  const { table, address, type } = channel
  const spans: RegisterSpan[] = [{ table, address, count: registerCount(type) }]
  if (channel.status) spans.push({ table: channel.status.table, address: channel.status.address, count: 1 })
  if (channel.kind === 'microvolts' && 'table' in channel.coldJunction) {
    const { coldJunction } = channel
    spans.push({
      table: coldJunction.table,
      address: coldJunction.address,
      count: registerCount(coldJunction.type),
    })
  }
  return spans
}

/** JSON Schema of the configuration file, for editors. */
export function gatewayConfigJsonSchema(): unknown {
  return z.toJSONSchema(gatewayConfigSchema, { io: 'input' })
}

function overlapsPartly(span: RegisterSpan, channel: z.infer<typeof channelSchema>): boolean {
  return spansOfChannel(channel).some((other) => {
    const isApart =
      other.table !== span.table ||
      other.address >= span.address + span.count ||
      span.address >= other.address + other.count
    return !isApart && (other.address !== span.address || other.count !== span.count)
  })
}

function printSpan({ table, address, count }: RegisterSpan): string {
  return `${table} ${address}${count > 1 ? `–${address + count - 1}` : ''}`
}

type CheckedRegister = {
  address: number
  type: (typeof registerTypes)[number]
  errorCodes: readonly z.infer<typeof errorCodeSchema>[]
}

function checkRegister(register: CheckedRegister, path: string[], context: z.RefinementCtx) {
  if (register.address + registerCount(register.type) > 65_536) {
    context.addIssue({
      code: 'custom',
      path: [...path, 'address'],
      message: `A ${register.type} at ${register.address} would end behind the last register`,
    })
  }
  const [least, greatest] = registerRange(register.type)
  for (const [index, code] of register.errorCodes.entries()) {
    const [from, to] = 'raw' in code ? [code.raw, code.raw] : [code.from, code.to]
    const where = [...path, 'errorCodes', index, 'raw' in code ? 'raw' : 'to']
    if (to < from) {
      context.addIssue({ code: 'custom', path: where, message: 'The end of the range is before its start' })
    } else if (from < least || to > greatest) {
      context.addIssue({
        code: 'custom',
        path: where,
        message: `A ${register.type} register never holds this: it goes from ${least} to ${greatest}`,
      })
    }
  }
}

type NamedModule = { name: string; channels: readonly { probeId: string }[] }

function checkRepeated(modules: readonly NamedModule[], context: z.RefinementCtx) {
  const names = new Set<string>()
  const placeOfProbe = new Map<string, string>()
  for (const [at, module] of modules.entries()) {
    if (names.has(module.name)) {
      context.addIssue({
        code: 'custom',
        path: ['modules', at, 'name'],
        message: `Two modules are called "${module.name}"`,
      })
    }
    names.add(module.name)
    for (const [index, { probeId }] of module.channels.entries()) {
      const before = placeOfProbe.get(probeId.toLowerCase())
      if (before !== undefined) {
        context.addIssue({
          code: 'custom',
          path: ['modules', at, 'channels', index, 'probeId'],
          message: `This probe is read by ${before} already; a probe has one channel`,
        })
      }
      placeOfProbe.set(probeId.toLowerCase(), `"${module.name}", channel ${index}`)
    }
  }
}
