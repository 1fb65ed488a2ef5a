/** A figure for a sentence: three digits that count, without idle noughts, with a true minus: 13.8, 0.0042, 1240. */
export function threeDigits(value: number): string {
  if (value === 0) return '0'
  const size = Math.floor(Math.log10(Math.abs(value)))
  const text = String(Number(value.toFixed(Math.min(20, Math.max(0, 2 - size)))))
  return text.replace('-', '\u2212')
}
