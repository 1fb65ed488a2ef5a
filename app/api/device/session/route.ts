import { deviceOf } from '@/lib/accounts/device-of'
import { signedInAnswer } from '@/lib/devices/device-answer'
import { operations } from '@/lib/devices/operations'
import { signInByPin } from '@/lib/devices/sign-in-by-pin'
import { deviceRoute } from '@/lib/http/route'

export const POST = deviceRoute(operations.signInByPin, async (device, { body, request }) => {
  const cookie = request.headers.get('cookie')
  const started = await signInByPin(device, body, deviceOf(request), cookie)
  return signedInAnswer(started.setCookie, cookie)
})
