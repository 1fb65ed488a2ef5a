/** What a day's record lacks, in sentences; the worn alarm is named wherever carbon monoxide is. */
export function missingWords(
  kept: {
    hasRoomAir: boolean
    hasYardAir: boolean
    hasCarbonMonoxide: boolean
    hasHeat: boolean
  },
  when: 'today' | 'that day',
): string[] {
  return [
    kept.hasRoomAir ? null : `No room temperature ${when}.`,
    kept.hasYardAir ? null : `No yard temperature ${when}.`,
    kept.hasCarbonMonoxide ? null : when === 'today' ? noCarbonMonoxideToday : 'No CO reading that day.',
    kept.hasHeat ? null : `No WBGT reading ${when}.`,
  ].filter((sentence) => sentence !== null)
}

export const alarmDecides = 'The alarm you wear decides.'
export const noCarbonMonoxideToday = `No CO reading today. ${alarmDecides}`
