import { clientAddress } from '@/lib/http/client-address'
import { openRoute } from '@/lib/http/route'
import { enrolGateway } from '@/lib/ingest/enrol-gateway'
import { operations } from '@/lib/ingest/operations'

export const POST = openRoute(operations.enrolGateway, ({ body, request }) =>
  enrolGateway(body, clientAddress(request)),
)
