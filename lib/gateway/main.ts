import { parseArgs } from 'node:util'
import { checkModules, printModuleChecks } from './check-modules'
import { gatewayConfigJsonSchema } from './config'
import { enrolGateway } from './enrol'
import { GatewayError } from './gateway-error'
import { createProgramLog } from './program-log'
import { readConfig } from './read-config'
import { runGateway } from './run-gateway'
import { readToken } from './token-file'

const usage = `npm run gateway -- CONFIG                 reads the modules and sends until it is told to end
npm run gateway -- CONFIG --check         looks the configuration over and reads every module once
npm run gateway -- --print-schema         prints the JSON Schema of the configuration
npm run gateway -- enrol --code CODE --config CONFIG [--server URL] [--name NAME]
                                          trades a one-time code for this gateway's token
CONFIG is a JSON file; docs/wiring-a-module.md has an example.`

const { values, positionals } = readArguments()

/** Exit status 2 for a command that makes no sense, 1 for what could not be done. */
async function main(): Promise<number> {
  if (values['print-schema'] === true) return print(JSON.stringify(gatewayConfigJsonSchema(), null, 2))
  if (values.help === true) return print(usage)
  const [first, ...more] = positionals
  if (first === 'enrol' && more.length === 0) return enrol()
  if (first === undefined || more.length > 0) throw new UsageError('Name the configuration file.')
  return values.check === true ? check(first) : run(first)
}

class UsageError extends Error {}

function readArguments() {
  try {
    return parseArgs({
      allowPositionals: true,
      options: {
        check: { type: 'boolean' },
        'print-schema': { type: 'boolean' },
        help: { type: 'boolean', short: 'h' },
        server: { type: 'string' },
        code: { type: 'string' },
        config: { type: 'string' },
        name: { type: 'string' },
      },
    })
  } catch (error) {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n\n${usage}\n`)
    process.exit(2)
  }
}

function print(text: string): number {
  process.stdout.write(`${text}\n`)
  return 0
}

async function enrol(): Promise<number> {
  const { server, code, config, name } = values
  if (code === undefined || config === undefined) {
    throw new UsageError('Enrolling needs --code CODE and --config CONFIG.')
  }
  const { gatewayName, tokenFile } = await enrolGateway({ configPath: config, code, server, name })
  return print(`This box is now the gateway "${gatewayName}". Its token is in ${tokenFile}.`)
}

async function check(path: string): Promise<number> {
  const config = readConfig(path)
  const checks = await checkModules(config)
  print(printModuleChecks(checks))
  try {
    readToken(config)
    print('The configuration is sound and the token is in place.')
  } catch (error) {
    if (!(error instanceof GatewayError)) throw error
    print(`The configuration is sound. ${error.message}`)
  }
  return checks.some(({ trouble }) => trouble !== null) ? 1 : 0
}

async function run(path: string): Promise<number> {
  const gateway = await runGateway(readConfig(path), createProgramLog())
  await new Promise<void>((resolve) => {
    for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => resolve())
  })
  await gateway.stop()
  return 0
}

try {
  process.exit(await main())
} catch (error) {
  if (error instanceof UsageError) {
    process.stderr.write(`${error.message}\n\n${usage}\n`)
    process.exit(2)
  }
  const isKnown = error instanceof GatewayError
  process.stderr.write(`${isKnown ? error.message : error instanceof Error ? error.stack : String(error)}\n`)
  process.exit(1)
}
