import type { TemperatureUnit } from '@/lib/format'
import { shownSentence } from '@/lib/recipes/shown-sentence'

/** The server's sentences say °C; a person reads their own unit. */
export function shownFields(
  fields: Readonly<Record<string, string>>,
  unit: TemperatureUnit,
): Record<string, string> {
  return Object.fromEntries(
    Object.entries(fields).map(([name, sentence]) => [name, shownSentence(name, sentence, unit)]),
  )
}
