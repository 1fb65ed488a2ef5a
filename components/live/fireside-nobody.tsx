import Link from 'next/link'
import { buttonClass } from '@/components/ui/button-style'
import { firesideType } from './fireside-type'

/** In the place of the marks at a shared tablet with nobody signed in: the firing can be followed, not marked. */
export function NobodyMarks({ onChoose }: { onChoose: () => void }) {
  return (
    <div className="flex min-h-0 flex-1 flex-col border-t border-line p-6">
      <p className={firesideType.label.className}>
        Nobody is signed in: you can follow this firing, not mark it.
      </p>
      <button
        type="button"
        onClick={onChoose}
        aria-haspopup="dialog"
        className="mt-5 flex min-h-[112px] w-full touch-manipulation items-center justify-center rounded-control border-3 border-water text-[32px] font-[640] text-water active:bg-wash"
      >
        Choose your name
      </button>
    </div>
  )
}

/** The firing has ended and is no longer for whoever reads this screen. */
export function FiresideGone({ serial }: { serial: string }) {
  return (
    <div className="px-6 py-8">
      <h1 className={firesideType.action.className}>{serial} is over.</h1>
      <p className="mt-4 text-large text-soft">
        What was fired is read by the one who fired it, and at the desk.
      </p>
      <div className="mt-8">
        <Link href="/room" className={buttonClass('due')}>
          Back to the room
        </Link>
      </div>
    </div>
  )
}
