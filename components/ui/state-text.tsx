import { classNames } from './class-names'

/**
 * A state in its own word. Tone says only what is abnormal or past: `normal` (no colour), `past` (soft:
 * superseded, finished), `attention` (amber: held, due), `wrong` (red: withdrawn, rejected, on hold).
 */
export function StateText({
  state,
  tone = 'normal',
  className,
}: {
  state: string
  tone?: 'normal' | 'past' | 'attention' | 'wrong'
  className?: string
}) {
  const tones = {
    normal: '',
    past: 'text-mute',
    attention: 'text-amber font-[560]',
    wrong: 'text-red font-[560]',
  } as const
  return <span className={classNames('whitespace-nowrap', tones[tone], className)}>{state}</span>
}
