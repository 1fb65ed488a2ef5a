import { route } from '@/lib/http/route'
import { operations } from '@/lib/ingest/operations'
import { revokeGatewayToken } from '@/lib/ingest/revoke-gateway-token'

export const DELETE = route(operations.revokeGatewayToken, (actor, { params }) =>
  revokeGatewayToken(actor, { gatewayId: params.id, tokenId: params.tokenId }),
)
