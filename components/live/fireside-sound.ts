/**
 * Two sounds, made by the browser itself: "act" (something is due) and "alarm" (something is wrong). They differ in
 * pitch, length and rhythm, so that they are told apart in noise. A sound is never the only sign.
 */

export const soundLevels = ['off', 'quiet', 'loud'] as const
export type SoundLevel = (typeof soundLevels)[number]
export type SoundName = 'act' | 'alarm'

/** One beep: when it begins, s from now; how long, s; its pitch, Hz. */
export type Beep = { atS: number; lengthS: number; hz: number }

/** Act: two low soft beeps, rising. Alarm: three pairs, high and low, as a hand bell would be swung. */
export const beepsOf: Record<SoundName, readonly Beep[]> = {
  act: [
    { atS: 0, lengthS: 0.18, hz: 523 },
    { atS: 0.26, lengthS: 0.26, hz: 659 },
  ],
  alarm: [0, 0.5, 1].flatMap((atS) => [
    { atS, lengthS: 0.2, hz: 988 },
    { atS: atS + 0.22, lengthS: 0.2, hz: 740 },
  ]),
}

/** Peak gain of a level; nothing is loud enough to hurt in a headset. */
const gainOf: Record<SoundLevel, number> = { off: 0, quiet: 0.12, loud: 0.6 }
/** A beep swells and fades over this, so that it does not click, s. */
const EDGE_S = 0.02

export type SoundPlayer = {
  /** Browsers let a page sound only after a touch: call it from one. */
  unlock: () => void
  play: (name: SoundName, level: SoundLevel) => void
}

/** @param open makes the context; a test gives its own. Answers a silent player where the browser has none. */
export function createSoundPlayer(open: () => AudioContext = () => new AudioContext()): SoundPlayer {
  let context: AudioContext | null = null
  const unlock = () => {
    try {
      context ??= open()
      void context.resume()
    } catch {
      context = null
    }
  }
  return {
    unlock,
    play: (name, level) => {
      if (context === null || gainOf[level] === 0 || context.state !== 'running') return
      for (const beep of beepsOf[name]) sound(context, beep, gainOf[level])
    },
  }
}

function sound(context: AudioContext, { atS, lengthS, hz }: Beep, gain: number): void {
  const oscillator = context.createOscillator()
  const envelope = context.createGain()
  const startS = context.currentTime + atS
  oscillator.type = 'triangle'
  oscillator.frequency.value = hz
  envelope.gain.setValueAtTime(0, startS)
  envelope.gain.linearRampToValueAtTime(gain, startS + EDGE_S)
  envelope.gain.setValueAtTime(gain, startS + lengthS - EDGE_S)
  envelope.gain.linearRampToValueAtTime(0, startS + lengthS)
  oscillator.connect(envelope).connect(context.destination)
  oscillator.start(startS)
  oscillator.stop(startS + lengthS)
}
