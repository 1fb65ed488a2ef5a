import { createHash, randomInt } from 'node:crypto'
import { checkCharacter37_36, isValid37_36 } from '@/lib/science/identifier'

/** No 0, O, 1, I, L, U, V: nothing that a hand or an eye takes for another. */
const letters = '23456789ABCDEFGHJKMNPQRSTWXYZ'
/** With the check character twelve: 29^11 is 53 bits, for 30 minutes and a few tries. */
const randomCount = 11

/** A fresh code, `K7QW-3M9X-TR4H`; its last letter checks the others (ISO/IEC 7064 MOD 37,36). */
export function makeCode(): string {
  for (;;) {
    const payload = Array.from({ length: randomCount }, () => letters.charAt(randomInt(letters.length))).join(
      '',
    )
    const check = checkCharacter37_36(payload)
    if (letters.includes(check)) return groupCode(payload + check)
  }
}

function groupCode(code: string): string {
  return [code.slice(0, 4), code.slice(4, 8), code.slice(8)].join('-')
}

/** A code as it was typed, without spaces and hyphens, in capitals; null when it cannot be one of ours. */
export function readCode(typed: string): string | null {
  const plain = typed.replaceAll(/[\s-]/g, '').toUpperCase()
  const isOurs = plain.length === randomCount + 1 && [...plain].every((letter) => letters.includes(letter))
  return isOurs && isValid37_36(plain) ? groupCode(plain) : null
}

export function codeSha256(code: string): string {
  return createHash('sha256').update(code).digest('hex')
}
