import { route } from '@/lib/http/route'
import { issueGatewayToken } from '@/lib/ingest/issue-gateway-token'
import { listGatewayTokens } from '@/lib/ingest/list-gateway-tokens'
import { operations } from '@/lib/ingest/operations'

export const GET = route(operations.listGatewayTokens, (actor, { params }) =>
  listGatewayTokens(actor, { gatewayId: params.id }),
)
export const POST = route(operations.issueGatewayToken, (actor, { params }) =>
  issueGatewayToken(actor, { gatewayId: params.id }),
)
