import { formatPercent } from '@/lib/format'

/** A stage's name inside a sentence: "Hold" becomes "hold", an abbreviation stays. */
export function inSentence(name: string): string {
  return /^[A-Z][a-z]/.test(name) ? name.charAt(0).toLowerCase() + name.slice(1) : name
}

/**
 * The clock's figures: minutes go on past 60 ("65:00"), since hours would not fit at this size. From 100 minutes on
 * whole minutes.
 */
export function clockFigures(seconds: number): string {
  // A countdown reads 0:00 only when nothing is left, so the last part of a second still counts as one.
  const whole = Math.max(0, Math.ceil(seconds - 1e-6))
  const minutes = Math.floor(whole / 60)
  return minutes >= 100 ? String(minutes) : `${minutes}:${String(whole % 60).padStart(2, '0')}`
}

/** Whole per cent; from far off "under 1 %" would not be read. */
export function roundPercent(fraction: number): string {
  return formatPercent(Math.round(fraction * 100) / 100)
}
