import { formatAge } from '@/lib/format'
import { classNames } from '@/components/ui/class-names'
import type { MarkKind } from '@/lib/firings/schema'
import { firesideType, TARGET_PX } from './fireside-type'

export type MarkButton = { kind: MarkKind; label: string; more: string }

/** The six marks, in the order of the hands. The lid's button says what a touch would mark, and how the lid is. */
export function markButtons(lid: { isOn: boolean; sinceMs: number | null }, nowMs: number): MarkButton[] {
  const since = lid.sinceMs === null ? '' : `, ${formatAge((nowMs - lid.sinceMs) / 1000)}`
  return [
    { kind: 'stir', label: 'Stir', more: '' },
    { kind: 'feed', label: 'Feed', more: '' },
    { kind: 'mist', label: 'Mist', more: 'wood, never coals' },
    lid.isOn
      ? { kind: 'lid off', label: 'Lid off', more: `lid is ON${since}` }
      : { kind: 'lid on', label: 'Lid on', more: `lid is OFF${since}` },
    { kind: 'turn over', label: 'Turn over', more: 'two people, or hoist' },
    { kind: 'note', label: 'Note', more: '' },
  ]
}

/** A touch marks; a note asks for its words first. */
export function FiresideMarks({
  buttons,
  onMark,
}: {
  buttons: readonly MarkButton[]
  onMark: (kind: MarkKind) => void
}) {
  return (
    <div
      role="group"
      aria-label="Marks"
      className="grid min-h-0 flex-1 grid-cols-2 gap-px border-t border-line bg-line"
      style={{ gridAutoRows: `minmax(${TARGET_PX}px, 1fr)` }}
    >
      {buttons.map(({ kind, label, more }) => (
        <button
          key={label}
          type="button"
          onClick={() => onMark(kind)}
          className="flex min-w-0 touch-manipulation flex-col items-center justify-center gap-1 bg-raised active:bg-wash"
        >
          <span className={firesideType.mark.className}>{label}</span>
          {more === '' ? null : (
            <span className={classNames(firesideType.small.className, 'text-soft')}>{more}</span>
          )}
        </button>
      ))}
    </div>
  )
}
