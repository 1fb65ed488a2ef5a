import { parseDecimal } from '@/lib/format'

/** A result as a laboratory writes it: a figure, or a limit that it lies below. */
export type AssayValue = { value: number; isBelowLimit: boolean }

/**
 * Reads "12.5", "12,5", "<0.5" and "< 0,5". A result below its limit stays one: it is never read as a figure, and
 * 0 is refused, because nothing that is assayed is measured as nothing.
 */
export function readAssayValue(typed: string): AssayValue | { error: string } {
  const text = typed.trim()
  const isBelowLimit = text.startsWith('<')
  const value = parseDecimal(isBelowLimit ? text.slice(1) : text)
  if (text === '') return { error: 'There is no result in this row.' }
  if (value === null) {
    return /^(n\.?\s?d\.?|nd|lod|loq|bdl|trace)/i.test(text)
      ? { error: `Write “${text}” with its limit, as in <0.5.` }
      : { error: `“${text}” is no result. Write a figure, or <0.5 for one below a limit of 0.5.` }
  }
  if (value < 0) return { error: 'A result cannot be below 0.' }
  if (value === 0)
    return { error: 'Write a result of 0 with its limit, as in <0.5: it is below it, not nothing.' }
  return { value, isBelowLimit }
}
