import { classNames } from '@/components/ui/class-names'
import { gatewayWords } from '@/lib/probes/gateway-words'
import type { GatewayDto } from '@/lib/probes/schema'

const tones = { plain: '', attention: 'text-amber', wrong: 'font-[560] text-red' } as const

/** How a gateway stands, in a sentence, with what to do. */
export function GatewayState({ gateway, nowMs }: { gateway: GatewayDto; nowMs: number }) {
  const { words, tone } = gatewayWords(gateway, nowMs)
  return <span className={classNames(tones[tone])}>{words}</span>
}
