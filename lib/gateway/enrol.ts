import * as z from 'zod'
import { GatewayError } from './gateway-error'
import { ingestProblemSchema } from './protocol'
import { readEnrolConfig } from './read-config'
import { writeTokenFile } from './token-file'

export const ENROL_PATH = '/api/gateways/enrol'

/** What is asked: the one-time code that an administrator was shown, and a name that helps to know the box. */
export const enrolRequestSchema = z.strictObject({
  code: z.string().trim().min(1).max(40),
  name: z.string().trim().min(1).max(80).optional(),
})

export const enrolAnswerSchema = z.object({
  token: z.string().regex(/^[\x21-\x7e]{1,200}$/),
  gatewayId: z.guid(),
  gatewayName: z.string(),
})

type EnrolOptions = {
  configPath: string
  code: string
  /** Left out: as the configuration says. */
  server?: string | undefined
  /** This box's name. */
  name?: string | undefined
  request?: typeof fetch
}

const TIMEOUT_MS = 15_000

/**
 * Trades a one-time code for a device token and puts that into the configuration's token file, readable by its owner
 * only. The token is shown nowhere.
 * @throws GatewayError in words when the server cannot be reached or does not take the code
 */
export async function enrolGateway(
  options: EnrolOptions,
): Promise<{ gatewayName: string; tokenFile: string }> {
  const { configPath, code, name, request = fetch } = options
  const config = readEnrolConfig(configPath)
  const server = options.server ?? config.server
  if (server === undefined || !URL.canParse(server)) {
    throw new GatewayError('Say where the server is: --server https://toasting.example')
  }
  const body = enrolRequestSchema.safeParse({ code, ...(name === undefined ? {} : { name }) })
  if (!body.success) throw new GatewayError('Give the code as it was shown: --code CODE')
  const { token, gatewayName } = await ask(new URL(ENROL_PATH, server), body.data, request)
  writeTokenFile(config.tokenFile, token)
  return { gatewayName, tokenFile: config.tokenFile }
}

async function ask(
  address: URL,
  body: z.infer<typeof enrolRequestSchema>,
  request: typeof fetch,
): Promise<z.infer<typeof enrolAnswerSchema>> {
  let response: Response
  let payload: unknown
  try {
    response = await request(address, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
      // A code goes to the server that was named and to no other.
      redirect: 'error',
      signal: AbortSignal.timeout(TIMEOUT_MS),
    })
    payload = await response.json().catch(() => null)
  } catch (error) {
    const cause = error instanceof Error && error.cause instanceof Error ? error.cause : error
    const reason = cause instanceof Error ? cause.message : String(cause)
    throw new GatewayError(`${address.origin} cannot be reached: ${reason}`)
  }
  const answer = enrolAnswerSchema.safeParse(payload)
  if (response.status === 201 && answer.success) return answer.data
  const problem = ingestProblemSchema.safeParse(payload)
  const reason = problem.success ? (problem.data.detail ?? problem.data.title) : `HTTP ${response.status}`
  throw new GatewayError(`${address.origin} did not enrol this gateway: ${reason}`)
}
