import { route } from '@/lib/http/route'
import { operations } from '@/lib/ingest/operations'
import { rotateGatewayToken } from '@/lib/ingest/rotate-gateway-token'

export const POST = route(operations.rotateGatewayToken, (actor, { params }) =>
  rotateGatewayToken(actor, { gatewayId: params.id, tokenId: params.tokenId }),
)
