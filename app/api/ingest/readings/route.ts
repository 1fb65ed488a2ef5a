import { gatewayRoute } from '@/lib/ingest/gateway-route'
import { storeReadings } from '@/lib/ingest/store-readings'

export const POST = gatewayRoute(storeReadings)
