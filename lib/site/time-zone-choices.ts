/** UTC, the zone in use, and every zone that this Node knows. */
export function timeZoneChoices(present: string): string[] {
  return [...new Set(['UTC', present, ...Intl.supportedValuesOf('timeZone')])]
}
