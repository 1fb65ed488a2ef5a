import type { ChannelConfig, GatewayConfig, ModuleConfig } from './config'
import { createModbusModule, type ChannelReading } from './modbus-module'
import { systemSteadyClock } from './poll-schedule'

export type ModuleCheck = { module: ModuleConfig; trouble: string | null; readings: ChannelReading[] }

/** Reads every channel of every module once, all modules at the same time. */
export function checkModules(config: Pick<GatewayConfig, 'modules'>): Promise<ModuleCheck[]> {
  return Promise.all(config.modules.map(checkModule))
}

async function checkModule(module: ModuleConfig): Promise<ModuleCheck> {
  let trouble: string | null = null
  const modbus = createModbusModule({
    config: module,
    clock: systemSteadyClock,
    onTrouble: (sentence) => {
      trouble = sentence
    },
  })
  try {
    return { readings: await modbus.poll(), module, trouble }
  } finally {
    modbus.close()
  }
}

/** A table of what was read, for a person at the box; troubles below it. */
export function printModuleChecks(checks: readonly ModuleCheck[]): string {
  const rows = checks.flatMap(({ module, readings }) =>
    module.channels.map((channel) => [
      module.name,
      channel.label ?? channel.probeId,
      `${channel.table} ${channel.address} ${channel.type}`,
      printReading(
        channel,
        readings.find(({ probeId }) => probeId === channel.probeId),
      ),
    ]),
  )
  const table = printTable(['module', 'channel', 'register', 'reads'], rows)
  const troubles = checks.flatMap(({ trouble }) => (trouble === null ? [] : [trouble]))
  return [table, ...troubles].join('\n')
}

function printReading(channel: ChannelConfig, reading: ChannelReading | undefined): string {
  if (reading?.tempC !== undefined) return `${reading.tempC.toFixed(2)} °C`
  if (reading?.emf !== undefined) {
    const { microvolts, coldJunctionC } = reading.emf
    return `${microvolts.toFixed(1)} µV, cold junction ${coldJunctionC.toFixed(2)} °C`
  }
  return `no reading: ${reading?.flag ?? 'fault'}${channel.status === undefined ? '' : ' (see its status bits)'}`
}

function printTable(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const widths = head.map((title, i) => Math.max(title.length, ...rows.map((row) => row[i]?.length ?? 0)))
  return [head, ...rows]
    .map((row) =>
      row
        .map((cell, i) => cell.padEnd(widths[i] ?? 0))
        .join('  ')
        .trimEnd(),
    )
    .join('\n')
}
