/**
 * Single keys at the fireside. A barcode scanner types as a keyboard does, only faster, and ends with Enter; what
 * comes in such a burst is a scan and presses nothing. Pure: instants come with the keys.
 */

/** Keys closer together than this were not pressed by a hand. */
export const BURST_MS = 50

export const keyNames = [
  { key: 's', words: 'Stir' },
  { key: 'f', words: 'Feed' },
  { key: 'm', words: 'Mist' },
  { key: 'l', words: 'Lid on or off' },
  { key: 't', words: 'Turn' },
  { key: 'o', words: 'Turn over' },
  { key: 'n', words: 'Note' },
  { key: 'e', words: 'The large control, held for a second' },
  { key: 'u', words: 'Undo the last mark, for 10 seconds' },
  { key: 'a', words: 'Seen: takes note of the alarm' },
  { key: 'w', words: 'Who marks, at a shared tablet' },
  { key: '?', words: 'This list' },
] as const
export type FiresideKey = (typeof keyNames)[number]['key']

export type KeyReading = { text: string; lastAtMs: number }
export const noKeys: KeyReading = { text: '', lastAtMs: -Infinity }

export type KeyStep =
  { reading: KeyReading; found: null } | { reading: KeyReading; found: { kind: 'scan'; text: string } }

/** Takes one more key. A burst of three or more that Enter ends is a scan. */
export function takeKey(reading: KeyReading, key: string, atMs: number): KeyStep {
  const isBurst = atMs - reading.lastAtMs <= BURST_MS
  if (key === 'Enter') {
    const isScan = isBurst && reading.text.length >= 3
    return { reading: noKeys, found: isScan ? { kind: 'scan', text: reading.text } : null }
  }
  if (key.length !== 1) return { reading, found: null }
  return { reading: { text: isBurst ? reading.text + key : key, lastAtMs: atMs }, found: null }
}

/** The key that a hand pressed, once no other has followed for {@link BURST_MS}; null in a burst. */
export function settledKey(reading: KeyReading, nowMs: number): FiresideKey | null {
  if (reading.text.length !== 1 || nowMs - reading.lastAtMs < BURST_MS) return null
  const pressed = reading.text.toLowerCase()
  return keyNames.find(({ key }) => key === pressed)?.key ?? null
}
