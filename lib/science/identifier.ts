/**
 * Check characters of serials: ISO/IEC 7064, hybrid system MOD 37,36, over 0–9 and A–Z. It finds every single wrong
 * character and all but one in 630 swaps of two different neighbours. Hyphens only help the eye and are dropped; small
 * letters count as capitals, since people type them.
 */

const CHARACTERS = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ'
const MODULUS = 36

/** The characters that count; null when there is one that the alphabet lacks. */
function countedCharacters(text: string): string | null {
  const characters = text.replaceAll('-', '')
  return /^[0-9A-Za-z]+$/.test(characters) ? characters.toUpperCase() : null
}

/** ISO/IEC 7064 hybrid recursion: P ← 2·((P + a) mod 36, or 36 for 0) mod 37, from P = 36. */
function foldCharacters(characters: string): number {
  let product = MODULUS
  for (const character of characters) {
    const sum = (product + CHARACTERS.indexOf(character)) % MODULUS
    product = (2 * (sum === 0 ? MODULUS : sum)) % (MODULUS + 1)
  }
  return product
}

/**
 * Check character of a payload by ISO/IEC 7064 MOD 37,36, to be written after it: SML-0427 gives P.
 *
 * @param payload letters A–Z, digits and hyphens, at least one letter or digit
 * @throws RangeError for an empty payload or a character that is none of these
 */
export function checkCharacter37_36(payload: string): string {
  const characters = countedCharacters(payload)
  if (characters === null) {
    throw new RangeError(
      'payload must hold letters A to Z, digits and hyphens, and at least one letter or digit',
    )
  }
  // The sum of the last step and the check character must be 1 modulo 36.
  return CHARACTERS.charAt((MODULUS + 1 - foldCharacters(characters)) % MODULUS)
}

/**
 * Whether a text ends with the right check character by ISO/IEC 7064 MOD 37,36. False, never an error, for a text
 * that has another character or fewer than two that count: it comes from people and scanners.
 */
export function isValid37_36(text: string): boolean {
  const characters = countedCharacters(text)
  if (characters === null || characters.length < 2) return false
  return checkCharacter37_36(characters.slice(0, -1)) === characters.at(-1)
}
