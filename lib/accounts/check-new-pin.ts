import { invalidField } from '@/lib/errors'

/** The middle column of the pad, and corners and crosses on it; common practice counts them among the first tried. */
const padFigures = ['2580', '0852', '1379', '9731', '1397', '7931', '2468', '8642', '1973', '3791']

/**
 * Holds a new PIN against what is tried first: figures that repeat, that run up or down, or a figure drawn on the pad.
 * @throws AppError 'invalid' naming `pin`
 */
export function checkNewPin(pin: string): void {
  if (isRepetition(pin)) throw invalidField('pin', 'This only repeats. Take figures that do not.')
  if (isRun(pin)) throw invalidField('pin', 'This runs up or down like 1234. Take figures that do not.')
  if (padFigures.includes(pin)) {
    throw invalidField('pin', 'This is a figure on the pad that is tried first. Take others.')
  }
}

/** 1111, 1212, 121212, 123123. */
function isRepetition(pin: string): boolean {
  const period = (pin + pin).indexOf(pin, 1)
  return period <= pin.length / 2
}

/** Each figure one more, or one less, than the one before; 9 and 0 are neighbours. */
function isRun(pin: string): boolean {
  const steps = [...pin].slice(1).map((figure, i) => (Number(figure) - Number(pin[i]) + 10) % 10)
  return steps.every((step) => step === 1) || steps.every((step) => step === 9)
}
