import { formatInstant } from '@/lib/format'
import type { ProbeDto, WaterCheckDto } from '@/lib/probes/schema'
import type { LeadPlace } from '@/lib/recipes/schema'
import { startList } from './fireside-cautions'

/** One line of the start list; `isWrong` is out of date, which the start then asks a signature for. */
export type StartItem = { id: string; words: string; more: string; isWrong: boolean }

/** What a person ticks before a fire: the cautions, then water and probe with their dates. */
export function startItems(
  water: WaterCheckDto | null,
  lead: ProbeDto | null,
  zone: string,
  /** What today's record says of carbon monoxide; it ends with what decides. */
  carbonMonoxide = '',
): StartItem[] {
  const fixed = startList.map((item) => ({
    ...item,
    more: item.id === 'carbon-monoxide' ? `${item.more} ${carbonMonoxide}`.trim() : item.more,
    isWrong: false,
  }))
  return [...fixed, waterItem(water, zone), probeItem(lead, zone)]
}

function waterItem(water: WaterCheckDto | null, zone: string): StartItem {
  if (water === null) return { id: 'water', words: 'Water was never checked.', more: '', isWrong: true }
  // Another source is another line: what was ticked for one is not said of the other.
  const id = `water ${water.id}`
  const due = formatInstant(water.dueAt, zone, 'day')
  const more = `${water.source}, checked ${formatInstant(water.checkedAt, zone, 'day')} by ${water.checkedBy}`
  if (water.overLimit !== null) {
    return {
      id,
      words: 'This water is not to be used.',
      more: `${water.source}: ${water.overLimit}`,
      isWrong: true,
    }
  }
  return water.isInDate
    ? { id, words: `Water checked, good until ${due}.`, more, isWrong: false }
    : { id, words: `Water check out of date since ${due}.`, more, isWrong: true }
}

function probeItem(lead: ProbeDto | null, zone: string): StartItem {
  const id = 'probe'
  if (lead === null) return { id, words: 'This hearth has no lead probe.', more: '', isWrong: true }
  if (lead.checkDueAt === null) {
    return { id, words: `${lead.name} was never checked.`, more: 'The lead probe', isWrong: true }
  }
  const due = formatInstant(lead.checkDueAt, zone, 'day')
  if (lead.isCheckDue) {
    return {
      id,
      words: `Check of ${lead.name} out of date since ${due}.`,
      more: 'The lead probe',
      isWrong: true,
    }
  }
  return lead.leadFaults.length > 0
    ? {
        id,
        words: `${lead.name} was never checked hot.`,
        more: 'The lead probe: a block where the dose is made is missing',
        isWrong: true,
      }
    : { id, words: `${lead.name} checked, good until ${due}.`, more: 'The lead probe', isWrong: false }
}

type Place = Pick<LeadPlace, 'height' | 'side' | 'depthMm'> & { mounting: string }

/** "bilge, side A, 2 mm, wedge" */
export function placeWords(place: { height: string } & Omit<Place, 'height'>): string {
  return `${place.height}, side ${place.side}, ${place.depthMm} mm, ${place.mounting}`
}

/** A dose is comparable at one place only. */
export function isSamePlace(probe: ProbeDto['place'], asked: LeadPlace): boolean {
  return (
    probe.height === asked.height &&
    probe.side === asked.side &&
    probe.depthMm === asked.depthMm &&
    probe.mounting === asked.mounting
  )
}
