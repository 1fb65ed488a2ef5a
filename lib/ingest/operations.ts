import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import { ingestAnswerSchema, ingestMessageSchema } from '@/lib/gateway/protocol'
import { defineOperation } from '@/lib/http/operation'
import {
  enrolGatewaySchema,
  enrolledGatewaySchema,
  enrolmentCodeSchema,
  healthSchema,
  issuedTokenSchema,
  tokenListSchema,
} from '@/lib/ingest/schema'

const gatewayParams = z.object({ id: z.uuid() })
const tokenParams = z.object({ id: z.uuid(), tokenId: z.uuid() })

export const operations = {
  receiveReadings: defineOperation({
    id: 'receiveReadings',
    method: 'POST',
    path: '/api/ingest/readings',
    summary:
      'Readings of a gateway (Bearer device token); answered after the commit, bad readings named by their number',
    tag: 'Readings',
    access: 'gateway',
    body: ingestMessageSchema,
    bodyLimit: 2 * 1024 * 1024,
    response: ingestAnswerSchema,
  }),
  listGatewayTokens: defineOperation({
    id: 'listGatewayTokens',
    method: 'GET',
    path: '/api/gateways/{id}/tokens',
    summary: 'Device tokens of a gateway, without the tokens themselves',
    tag: 'Readings',
    access: rolesWith('room:write'),
    params: gatewayParams,
    response: tokenListSchema,
  }),
  issueGatewayToken: defineOperation({
    id: 'issueGatewayToken',
    method: 'POST',
    path: '/api/gateways/{id}/tokens',
    summary: 'Make a device token; it is answered this once',
    tag: 'Readings',
    access: rolesWith('room:write'),
    params: gatewayParams,
    response: issuedTokenSchema,
    status: 201,
  }),
  revokeGatewayToken: defineOperation({
    id: 'revokeGatewayToken',
    method: 'DELETE',
    path: '/api/gateways/{id}/tokens/{tokenId}',
    summary: 'Revoke a device token; its next message is refused',
    tag: 'Readings',
    access: rolesWith('room:write'),
    params: tokenParams,
  }),
  rotateGatewayToken: defineOperation({
    id: 'rotateGatewayToken',
    method: 'POST',
    path: '/api/gateways/{id}/tokens/{tokenId}/rotate',
    summary: 'A new device token in place of one, which serves until the new is first used or 24 h at most',
    tag: 'Readings',
    access: rolesWith('room:write'),
    params: tokenParams,
    response: issuedTokenSchema,
    status: 201,
  }),
  makeEnrolmentCode: defineOperation({
    id: 'makeEnrolmentCode',
    method: 'POST',
    path: '/api/gateways/{id}/enrolment-codes',
    summary: 'Make the one-time code by which a gateway fetches its token; it is answered this once',
    tag: 'Readings',
    access: rolesWith('room:write'),
    params: gatewayParams,
    response: enrolmentCodeSchema,
    status: 201,
  }),
  enrolGateway: defineOperation({
    id: 'enrolGateway',
    method: 'POST',
    path: '/api/gateways/enrol',
    summary: 'A gateway’s program fetches its device token for a one-time code; tries are counted by address',
    tag: 'Readings',
    access: 'public',
    body: enrolGatewaySchema,
    response: enrolledGatewaySchema,
    status: 201,
  }),
  healthLive: defineOperation({
    id: 'healthLive',
    method: 'GET',
    path: '/api/health/live',
    summary: 'The server is up',
    tag: 'Health',
    access: 'public',
    response: healthSchema,
  }),
  healthReady: defineOperation({
    id: 'healthReady',
    method: 'GET',
    path: '/api/health/ready',
    summary: 'The server can do its work: the database answers; 503 otherwise',
    tag: 'Health',
    access: 'public',
    response: healthSchema,
  }),
}
