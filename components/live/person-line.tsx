import { classNames } from '@/components/ui/class-names'
import type { AtTheFire } from './device-view'
import { firesideType } from './fireside-type'

/** Who marks at this shared tablet, and one touch to change that. Nothing in an ordinary browser or on a wall screen. */
export function PersonLine({
  person,
  device,
  waiting,
  onChange,
}: AtTheFire & {
  /** Marks that wait until somebody else is signed in. */
  waiting: readonly { name: string; count: number }[]
  onChange: () => void
}) {
  if (device === null || device.kind === 'wall screen') return null
  return (
    <button
      type="button"
      onClick={onChange}
      aria-haspopup="dialog"
      className="flex min-h-[85px] shrink-0 touch-manipulation flex-col items-end justify-center px-6 text-right active:bg-wash"
    >
      <span className={firesideType.label.className}>
        {person === null ? (
          'Nobody is signed in'
        ) : (
          <>
            Marking as <span className="font-[640]">{person.name}</span>
          </>
        )}
        <span className="ml-3 text-water">{person === null ? 'Choose your name' : 'change'}</span>
      </span>
      {waiting.map(({ name, count }) => (
        <span key={name} className={classNames(firesideType.small.className, 'text-amber')}>
          {count === 1 ? 'One mark' : `${count} marks`} of {name} {count === 1 ? 'waits' : 'wait'} until{' '}
          {name} signs in here
        </span>
      ))}
    </button>
  )
}
