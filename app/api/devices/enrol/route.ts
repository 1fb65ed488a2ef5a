import { deviceOf } from '@/lib/accounts/device-of'
import { answerWithCookie } from '@/lib/devices/device-answer'
import { enrolDevice } from '@/lib/devices/enrol-device'
import { operations } from '@/lib/devices/operations'
import { openRoute } from '@/lib/http/route'

export const POST = openRoute(operations.enrolDevice, async ({ body, request }) => {
  const { device, setCookie } = await enrolDevice(body, deviceOf(request))
  return answerWithCookie(device, setCookie)
})
