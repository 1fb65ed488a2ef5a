import { readFileSync } from 'node:fs'
import { dirname, resolve } from 'node:path'
import type * as z from 'zod'
import { enrolConfigSchema, gatewayConfigSchema, type GatewayConfig } from './config'
import { GatewayError } from './gateway-error'

/** The configuration with its paths made whole. @throws GatewayError naming each field that does not fit */
export function readConfig(path: string): GatewayConfig {
  const config = parseConfig(gatewayConfigSchema, path)
  const folder = dirname(resolve(path))
  return {
    ...config,
    ...(config.tokenFile === undefined ? {} : { tokenFile: resolve(folder, config.tokenFile) }),
    spool: { ...config.spool, folder: resolve(folder, config.spool.folder) },
  }
}

/** What enrolling needs of a configuration that may not have its modules yet. @throws GatewayError */
export function readEnrolConfig(path: string): { server?: string | undefined; tokenFile: string } {
  const { server, tokenFile } = parseConfig(enrolConfigSchema, path)
  return { server, tokenFile: resolve(dirname(resolve(path)), tokenFile) }
}

function parseConfig<Schema extends z.ZodType>(schema: Schema, path: string): z.output<Schema> {
  const parsed = schema.safeParse(parseJson(path))
  if (parsed.success) return parsed.data
  const lines = parsed.error.issues.flatMap((issue) => linesOf(issue, []))
  throw new GatewayError(`${path} cannot be used:\n${lines.map((line) => `  ${line}`).join('\n')}`)
}

function parseJson(path: string): unknown {
  let text: string
  try {
    text = readFileSync(path, 'utf8')
  } catch (error) {
    throw new GatewayError(`The configuration cannot be read: ${messageOf(error)}`)
  }
  try {
    return JSON.parse(text)
  } catch (error) {
    throw new GatewayError(`${path} is not JSON: ${messageOf(error)}`)
  }
}

/** One line for each fault, beginning with the field; of alternatives, those of the one that came nearest. */
function linesOf(issue: z.core.$ZodIssue, before: readonly PropertyKey[]): string[] {
  const path = [...before, ...issue.path]
  if (issue.code === 'invalid_union' && issue.errors.length > 0) {
    const nearest = [...issue.errors].sort((a, b) => weight(a) - weight(b))[0] ?? []
    return nearest.flatMap((inner) => linesOf(inner, path))
  }
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => `${printPath([...path, key])}: there is no such field`)
  }
  return [`${printPath(path)}: ${issue.message}`]
}

/** Fields that are missing altogether speak against an alternative more than values that do not fit. */
function weight(issues: readonly z.core.$ZodIssue[]): number {
  return issues.reduce((sum, issue) => sum + (issue.code === 'invalid_type' ? 2 : 1), 0)
}

function printPath(path: readonly PropertyKey[]): string {
  if (path.length === 0) return 'the file'
  return path
    .map((key) => (typeof key === 'number' ? `[${key}]` : `.${String(key)}`))
    .join('')
    .replace(/^\./, '')
}

function messageOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error)
}
