import { route } from '@/lib/http/route'
import { createGateway } from '@/lib/probes/create-gateway'
import { listGateways } from '@/lib/probes/list-gateways'
import { operations } from '@/lib/probes/operations'

export const GET = route(operations.listGateways, (actor) => listGateways(actor))
export const POST = route(operations.createGateway, (actor, { body }) => createGateway(actor, body))
