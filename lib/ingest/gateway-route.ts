import type { IngestAnswer } from '@/lib/gateway/protocol'
import { problemResponse } from '@/lib/http/problem'
import { readJsonBody } from '@/lib/http/read-json-body'
import { operations } from '@/lib/ingest/operations'
import type { GatewayIdentity } from '@/lib/ingest/verify-device-token'
import { bearerOf, verifyDeviceToken } from '@/lib/ingest/verify-device-token'
import { now } from '@/lib/runtime'

/**
 * The route of gateways. The token is looked at before the body, so that nobody learns anything, or makes the server
 * read 2 MiB, without one; the message is read by the verb, which names bad readings instead of refusing them all.
 */
export function gatewayRoute(
  store: (gateway: GatewayIdentity, message: unknown, receivedAt: Date) => Promise<IngestAnswer>,
) {
  return async (request: Request): Promise<Response> => {
    const receivedAt = now()
    try {
      const gateway = await verifyDeviceToken(bearerOf(request.headers.get('authorization')))
      const message = await readJsonBody(request, operations.receiveReadings.bodyLimit)
      return Response.json(await store(gateway, message, receivedAt), {
        headers: { 'cache-control': 'no-store' },
      })
    } catch (error) {
      return problemResponse(error)
    }
  }
}
