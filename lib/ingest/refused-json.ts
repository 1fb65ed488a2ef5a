import type { RawReading } from '@/lib/ingest/read-envelope'

const mostLetters = 2_000
/** jsonb takes neither NUL nor half a surrogate pair; JSON.stringify writes both as escapes. */
const untakeable = /\\u(?:0000|d[89a-f])/i

/** A refused reading as it came, as JSON that PostgreSQL takes; what is too long or cannot be kept is cut to a text. */
export function refusedJson(reading: RawReading): string {
  const text = JSON.stringify(reading)
  if (text.length <= mostLetters && !untakeable.test(text)) return text
  const shown = text
    .slice(0, mostLetters)
    .replaceAll(/[^\x20-\x7e]/g, '?')
    .replaceAll('\\', '/')
  return JSON.stringify({ seq: reading.seq, asText: shown })
}
