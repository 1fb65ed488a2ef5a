import { operations } from '@/lib/devices/operations'
import { serviceWorkerAnswer, serviceWorkerScript } from '@/lib/devices/service-worker-script'
import { openRoute } from '@/lib/http/route'

export const dynamic = 'force-dynamic'
export const GET = openRoute(operations.getServiceWorker, async () =>
  serviceWorkerAnswer(await serviceWorkerScript()),
)
