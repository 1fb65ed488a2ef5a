import type { Verdict } from '@/lib/science/score-types'
import { classNames } from './class-names'

const words: Record<Verdict, { text: string; short: string; tone: string }> = {
  'in tolerance': { text: 'In tolerance', short: 'in', tone: '' },
  'cannot tell': { text: 'Cannot tell', short: 'cannot tell', tone: 'text-amber' },
  'out of tolerance': { text: 'Out of tolerance', short: 'out', tone: 'text-red font-[560]' },
  'limit broken': { text: 'Limit broken', short: 'limit broken', tone: 'text-red font-[560]' },
  incomplete: { text: 'Incomplete', short: 'incomplete', tone: 'text-amber' },
}

/** A verdict in words; normal has no colour. Null: not scored yet. */
export function VerdictText({
  verdict,
  isShort = false,
  className,
}: {
  verdict: Verdict | null
  isShort?: boolean
  className?: string
}) {
  if (verdict === null) return <span className={classNames('text-mute', className)}>not scored</span>
  const { text, short, tone } = words[verdict]
  return <span className={classNames(tone, className)}>{isShort ? short : text}</span>
}
