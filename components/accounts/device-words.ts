/** "Firefox on Windows" from what a browser says it is; the whole text is seldom readable. */
export function deviceWords(userAgent: string | null): string {
  if (userAgent === null || userAgent === '') return 'A program that does not say what it is'
  const browser = firstMatch(userAgent, [
    [/\bEdg\//, 'Edge'],
    [/\bOPR\//, 'Opera'],
    [/\bFirefox\/|\bFxiOS\//, 'Firefox'],
    [/Chrom(e|ium)\/|\bCriOS\//, 'Chrome'],
    [/\bSafari\//, 'Safari'],
    [/^curl\//, 'curl'],
  ])
  const system = firstMatch(userAgent, [
    [/iPhone/, 'an iPhone'],
    [/iPad/, 'an iPad'],
    [/Android/, 'Android'],
    [/Windows/, 'Windows'],
    [/Mac OS X/, 'a Mac'],
    [/Linux/, 'Linux'],
  ])
  if (browser === null) return userAgent.slice(0, 60)
  return system === null ? browser : `${browser} on ${system}`
}

function firstMatch(text: string, choices: readonly (readonly [RegExp, string])[]): string | null {
  return choices.find(([pattern]) => pattern.test(text))?.[1] ?? null
}
