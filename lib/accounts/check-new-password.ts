import commonPasswords from '@/lib/accounts/common-passwords.json'
import { invalidField } from '@/lib/errors'

const common = new Set(commonPasswords.words)
const rows = [
  'abcdefghijklmnopqrstuvwxyz',
  '0123456789',
  ...['qwertyuiop', 'asdfghjkl', 'zxcvbnm', 'azertyuiop', 'qsdfghjklm', 'wxcvbn', 'qwertzuiop', 'yxcvbnm'],
]
const asLetters: Readonly<Record<string, string>> = {
  '0': 'o',
  '1': 'i',
  '3': 'e',
  '4': 'a',
  '5': 's',
  '7': 't',
  '8': 'b',
  '@': 'a',
  $: 's',
  '!': 'i',
}

/**
 * Holds a new password against what attackers try first (NIST SP 800-63B, 3.1.1.2): common passwords, repetitions,
 * rows of the keyboard, and the person's or the product's own words. No kinds of characters are asked for.
 * @throws AppError 'invalid' naming `field`, with the reason.
 */
export function checkNewPassword(
  password: string,
  own: { email: string; name: string; siteName?: string },
  field = 'password',
): void {
  const plain = password.normalize('NFKC').toLowerCase()
  if (new Set(plain).size < 5) {
    throw invalidField(
      field,
      'This repeats too few characters. Take, for example, four words that do not belong together.',
    )
  }
  if (isCommon(plain)) {
    throw invalidField(
      field,
      'This is among the first passwords that attackers try. Take, for example, four words that do not belong together.',
    )
  }
  if (isOwnWords(plain, own)) {
    throw invalidField(
      field,
      'This is made of your name, your e-mail address or the product’s name. Choose something that nobody can look up.',
    )
  }
}

/** True when all of it is common words, rows of the keyboard and digits or signs put around them. */
function isCommon(plain: string): boolean {
  if (common.has(plain) || isRow(plain) || isRepetition(plain)) return true
  // Words of other scripts are not in the list, and taking their letters away would leave nothing to judge by.
  if (/[^a-z\P{L}]/u.test(plain)) return false
  return [plain, undisguise(plain)].some((text) => isMadeOf(text.replaceAll(/[^a-z]+/g, '')))
}

function undisguise(plain: string): string {
  const trimmed = plain.replaceAll(/^[^a-z]+|[^a-z]+$/g, '')
  return [...trimmed].map((character) => asLetters[character] ?? character).join('')
}

function isMadeOf(letters: string): boolean {
  if (letters.length < 3) return false
  return common.has(letters) || common.has(shortestPeriod(letters)) || isRow(letters) || isTwoWords(letters)
}

/** Two common words put together; "password" and "welcome" are no better side by side. */
function isTwoWords(letters: string): boolean {
  for (let cut = 3; cut <= letters.length - 3; cut += 1) {
    if (common.has(letters.slice(0, cut)) && common.has(letters.slice(cut))) return true
  }
  return false
}

function isRow(text: string): boolean {
  return rows.some((row) => {
    const backwards = [...row].reverse().join('')
    return [row, backwards].some((one) => one.repeat(4).includes(text))
  })
}

function isRepetition(text: string): boolean {
  return shortestPeriod(text).length <= text.length / 2 && shortestPeriod(text).length <= 4
}

/** The shortest text that repeated gives this one: "abcabc" → "abc". */
function shortestPeriod(text: string): string {
  const at = (text + text).indexOf(text, 1)
  return text.slice(0, at === -1 ? text.length : at)
}

function isOwnWords(plain: string, own: { email: string; name: string; siteName?: string }): boolean {
  const words = [
    own.email,
    own.email.split('@')[0] ?? '',
    own.name,
    own.siteName ?? '',
    'emberstave',
    'cooperage',
  ]
    .flatMap((text) => [text.toLowerCase(), ...text.toLowerCase().split(/[^\p{L}\p{N}]+/u)])
    .filter((word) => word.length >= 4)
  const left = words
    .sort((a, b) => b.length - a.length)
    .reduce((text, word) => text.replaceAll(word, ''), plain)
  return left !== plain && left.replaceAll(/[^\p{L}]+/gu, '').length < 4
}
