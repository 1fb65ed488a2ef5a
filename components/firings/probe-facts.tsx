import { capitalize } from '@/lib/format'
import { silenceWords, treatmentWords } from '@/components/firings/gap-words'
import { Facts } from '@/components/ui/facts'
import type { FiringPicture, ProbeCheckFact } from '@/lib/firings/picture-types'
import type { FiringDto } from '@/lib/firings/schema'
import { formatInstant, formatNumber, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { Gap } from '@/lib/science/gaps'

type Probe = FiringDto['probes'][number]

/** The probes of a firing, where each sat, what it was checked at, and when it said nothing. */
export function ProbeFacts({ picture, unit }: { picture: FiringPicture; unit: TemperatureUnit }) {
  const { firing, checks, timeZone, curves } = picture
  if (firing.probes.length === 0) return null
  const probes = firing.probes.map((probe) => ({
    name: `${capitalize(shortPlace(probe))}${probe.role === 'lead' ? ', lead' : ''}`,
    value: (
      <>
        {probeWords(probe)},{' '}
        <CheckWords
          checks={checks.filter((check) => check.probeId === probe.probeId)}
          isWood={probe.role !== 'coals'}
          zone={timeZone}
          unit={unit}
        />
        {periodWords(firing, probe, timeZone)}
      </>
    ),
  }))
  const gaps = curves === null ? [] : gapFacts(picture)
  return (
    <section>
      <h2 className="mb-1">The probes</h2>
      <Facts isRuled facts={[...probes, ...gaps]} />
    </section>
  )
}

function shortPlace(probe: Probe): string {
  return probe.height === 'coals' ? probe.height : `${probe.height} ${probe.side}`
}

/** The probe's own name is said only where it is not that of its place. */
function probeWords(probe: Probe): string {
  const depth = `${formatNumber(probe.depthMm, probe.depthMm % 1 === 0 ? 0 : 1)}\u00a0mm`
  const where = probe.role === 'coals' ? 'over the coals' : `${depth}, ${probe.mounting}`
  const isNamedByPlace = probe.name.toLowerCase() === shortPlace(probe).toLowerCase()
  return `${isNamedByPlace ? '' : `${probe.name}: `}${where}, ${probe.thermocoupleType} class ${probe.iecClass}`
}

function CheckWords({
  checks,
  isWood,
  zone,
  unit,
}: {
  checks: readonly ProbeCheckFact[]
  /** A coals probe makes no dose and needs no check. */
  isWood: boolean
  zone: string
  unit: TemperatureUnit
}) {
  const newest = checks.map((check) => check.checkedAt).sort()
  const last = newest.at(-1)
  if (last === undefined) {
    return (
      <span className={isWood ? 'text-amber' : ''}>
        {isWood ? 'never checked before this firing' : 'not checked'}
      </span>
    )
  }
  const points = checks.map((check) => formatNumber(toShownTemp(check.referenceTempC, unit))).join(', ')
  return (
    <>
      checked {formatInstant(last, zone, 'date')} at {points}
      {`\u00a0${unitName(unit)}`}
      {checks.some((check) => check.wasOverdue) ? (
        <span className="text-amber">, overdue when the firing began</span>
      ) : null}
    </>
  )
}

/** Said only when a probe did not read the whole firing. */
function periodWords(firing: FiringDto, probe: Probe, zone: string): string {
  const isWhole = firing.probes.filter((other) => other.role === probe.role).length === 1
  if (isWhole) return ''
  const until = probe.untilAt === null ? '' : ` to ${formatInstant(probe.untilAt, zone, 'time')}`
  return `, from ${formatInstant(probe.fromAt, zone, 'time')}${until}`
}

function gapFacts({ curves, timeZone }: FiringPicture): { name: string; value: string }[] {
  if (curves === null) return []
  const zeroMs = Date.parse(curves.zeroAt)
  const words = (name: string, gap: Gap, does: string) =>
    `${name}: ${silenceWords(gap)} at ${formatInstant(zeroMs + gap.startS * 1000, timeZone, 'time')}, ${does}`
  const lines = [
    ...curves.leadGaps.map((gap) => words(curves.lead.name, gap, treatmentWords(gap))),
    ...curves.oppositeGaps.map((gap) =>
      words(curves.opposite?.name ?? '', gap, 'left out of the spread where long'),
    ),
  ]
  if (lines.length === 0) return [{ name: 'No reading', value: 'never between toast start and rest' }]
  return lines.map((value, i) => ({ name: i === 0 ? 'No reading' : '\u00a0', value }))
}
