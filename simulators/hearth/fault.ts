import { parseArgs } from 'node:util'
import { GATEWAY_FAULTS, MODULE_FAULTS, PROBE_FAULTS } from './faults'

/*
 * Puts a fault on a simulated hearth:
 *   CONTROL_PORT=4180 node --import tsx simulators/hearth/fault.ts --hearth 2 --kind 'open circuit' --for 60
 */

const usage = `Say which fault, where, and for how many seconds:
  node --import tsx simulators/hearth/fault.ts --hearth 2 --kind 'open circuit' --for 60 [--probe lead]
Kinds: ${[...PROBE_FAULTS, ...GATEWAY_FAULTS].join(', ')}.
With FEED=modbus: ${[...PROBE_FAULTS, 'restart', ...MODULE_FAULTS].join(', ')}.
Probes: lead, opposite, coals. The port is CONTROL_PORT or --port, as the simulator was started with.`

const { values } = parseArgs({
  options: {
    hearth: { type: 'string' },
    kind: { type: 'string' },
    for: { type: 'string', default: '60' },
    probe: { type: 'string', default: 'lead' },
    port: { type: 'string', default: process.env.CONTROL_PORT ?? '0' },
  },
})

if (values.hearth === undefined || values.kind === undefined || values.port === '0') {
  console.log(usage)
  process.exitCode = 2
} else {
  await order(values.port, {
    hearth: Number(values.hearth),
    kind: values.kind,
    forS: Number(values.for),
    probe: values.probe,
  })
}

async function order(port: string, body: unknown) {
  try {
    const response = await fetch(`http://127.0.0.1:${port}/faults`, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
    })
    console.log(await response.text())
    if (!response.ok) process.exitCode = 1
  } catch {
    console.log(`Nothing answers on port ${port}. Start the simulator with CONTROL_PORT=${port}.`)
    process.exitCode = 1
  }
}
