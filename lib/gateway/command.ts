import { hostname } from 'node:os'
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

export type CommandSurroundings = {
  print: (text: string) => void
  printError: (text: string) => void
  /** Settles when the program is to end. */
  untilEnded: () => Promise<void>
}

class UsageError extends Error {}

/** One command line; gives the exit status: 2 when it makes no sense, 1 when it could not be done. */
export async function runCommand(args: readonly string[], around: CommandSurroundings): Promise<number> {
  try {
    return await run(readArguments(args), around)
  } catch (error) {
    if (error instanceof UsageError) {
      around.printError(`${error.message}\n\n${usage}`)
      return 2
    }
    const isKnown = error instanceof GatewayError || !(error instanceof Error)
    around.printError(
      isKnown ? String(error instanceof Error ? error.message : error) : (error.stack ?? error.message),
    )
    return 1
  }
}

type Arguments = ReturnType<typeof readArguments>

function readArguments(args: readonly string[]) {
  try {
    return parseArgs({
      args: [...args],
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
    throw new UsageError(error instanceof Error ? error.message : String(error))
  }
}

async function run({ values, positionals }: Arguments, around: CommandSurroundings): Promise<number> {
  const [first, ...more] = positionals
  if (values['print-schema'] === true) {
    around.print(JSON.stringify(gatewayConfigJsonSchema(), null, 2))
    return 0
  }
  if (values.help === true) {
    around.print(usage)
    return 0
  }
  if (first === undefined || more.length > 0) throw new UsageError('Name the configuration file.')
  if (first === 'enrol') return enrol(values, around)
  if (values.check === true) return check(first, around)
  const gateway = await runGateway(readConfig(first), createProgramLog(around.print))
  await around.untilEnded()
  await gateway.stop()
  return 0
}

async function enrol(values: Arguments['values'], { print }: CommandSurroundings): Promise<number> {
  const { server, code, config, name } = values
  if (code === undefined || config === undefined) {
    throw new UsageError('Enrolling needs --code CODE and --config CONFIG.')
  }
  const machineName = name ?? hostname().slice(0, 80)
  const { gatewayName, tokenFile } = await enrolGateway({
    configPath: config,
    code,
    server,
    name: machineName,
  })
  print(`This box is now the gateway "${gatewayName}". Its token is in ${tokenFile}.`)
  return 0
}

async function check(path: string, { print }: CommandSurroundings): Promise<number> {
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
