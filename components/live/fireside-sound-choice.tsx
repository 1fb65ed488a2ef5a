import { soundLevels } from './fireside-sound'
import type { SoundLevel } from './fireside-sound'

const words: Record<SoundLevel, string> = { off: 'No sound', quiet: 'Quiet', loud: 'Loud' }

/** This device's sound; a touch chooses it and lets it be heard. */
export function SoundChoice({
  level,
  onChoose,
}: {
  level: SoundLevel
  onChoose: (level: SoundLevel) => void
}) {
  return (
    <div role="group" aria-label="Sound on this device" className="mt-4 flex flex-wrap items-center gap-3">
      <p className="mr-auto">
        Sound{' '}
        <span className="text-soft">
          on this device: two notes when something is due, a bell for an alarm
        </span>
      </p>
      {soundLevels.map((one) => (
        <button
          key={one}
          type="button"
          aria-pressed={one === level}
          className="control min-w-[110px] touch-manipulation aria-pressed:border-text! aria-pressed:font-[640]"
          onClick={() => onChoose(one)}
        >
          {words[one]}
        </button>
      ))}
    </div>
  )
}
