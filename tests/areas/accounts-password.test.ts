import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { checkNewPassword } from '@/lib/accounts/check-new-password'
import { newPassword } from '@/lib/accounts/schema'

const own = {
  email: 'tobin.ash@saltmarsh.example',
  name: 'Tobin Ashworth',
  siteName: 'Saltmarsh Lane Cooperage',
}

function verdict(password: string): string {
  try {
    checkNewPassword(password, own)
    return 'taken'
  } catch {
    return 'refused'
  }
}

describe('a new password', () => {
  test.each([
    'password1234',
    'P@ssw0rd2026!',
    'passwordpassword',
    'welcome123456',
    'iloveyouforever',
    'qwertyuiop12',
    'qwertyuiopasdfghjkl'.slice(0, 10) + '99',
    '123456789012',
    '0987654321098',
    'aaaaaaaaaaaa',
    'abababababab',
    'abcdefghijkl',
    'dragonmonkey1',
    'letmein!letmein!',
    'tobinashworth',
    'tobin.ash@saltmarsh.example',
    'Emberstave2027',
    'saltmarsh lane 1',
  ])('such as %j is refused', (password) => {
    expect(verdict(password)).toBe('refused')
  })

  test.each([
    'resin lantern gravel 41',
    'correct horse battery',
    'aplainlongsentence',
    'zwölf Boxkämpfer jagen',
    '合言葉は長いほうがよいです',
    'mK9#vR2$xQ7&',
    'my dragon eats toast at noon',
  ])('such as %j is taken, whatever kinds of characters it has', (password) => {
    expect(verdict(password)).toBe('taken')
  })

  test('has 12 to 128 characters, counted as a person counts them', () => {
    expect(newPassword.safeParse('a'.repeat(11)).success).toBe(false)
    expect(newPassword.safeParse('a'.repeat(12)).success).toBe(true)
    expect(newPassword.safeParse('🪵'.repeat(12)).success).toBe(true)
    expect(newPassword.safeParse('🪵'.repeat(11)).success).toBe(false)
    expect(newPassword.safeParse('a'.repeat(129)).success).toBe(false)
  })

  test('of random letters is practically always taken', () => {
    fc.assert(
      fc.property(
        fc.array(fc.constantFrom(...'abcdefghijklmnopqrstuvwxyz'), { minLength: 14, maxLength: 40 }),
        (letters) => new Set(letters).size < 7 || verdict(letters.join('')) === 'taken',
      ),
      { seed: 20270201, numRuns: 500 },
    )
  })

  test('made by putting signs around a common word is refused, however many', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('password', 'dragon', 'welcome', 'winemaker', 'sunshine'),
        fc.array(fc.constantFrom(...'0123456789!?.-'), { minLength: 4, maxLength: 10 }),
        (word, signs) => verdict(`${word}${signs.join('')}`) === 'refused',
      ),
      { seed: 20270202, numRuns: 300 },
    )
  })
})
