import { checkCharacter37_36 } from '@/lib/science/identifier'

/** A serial as it is burnt in: prefix, four digits or more, ISO 7064 MOD 37,36 check character (SML-0427-P). */
export function pieceSerial(prefix: string, number: number): string {
  const digits = String(number).padStart(4, '0')
  return `${prefix}-${digits}-${checkCharacter37_36(`${prefix}${digits}`)}`
}
