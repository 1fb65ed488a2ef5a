import { Constants, Formula, Limit, Part, Worked } from '@/components/numbers/part'
import { Table } from '@/components/ui/table'
import { formatDoseFigure, formatNumber, formatTemp, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { smallestHonestTolerance } from '@/lib/recipes/honest-tolerance'
import { doseInterval } from '@/lib/science/dose-interval'
import { percentOfDosePerC } from '@/lib/science/dose-ratio'
import {
  arrheniusEquivalentMinutes,
  doseRate,
  equivalentMinutes,
  log10Severity,
  zCFromActivationEnergy,
} from '@/lib/science/heat-dose'
import type { SiteRules } from '@/lib/science/site-rules'

type Props = { rules: SiteRules; unit: TemperatureUnit }

const holds = [
  { minutes: 30, tempC: 125 },
  { minutes: 35, tempC: 165 },
  { minutes: 40, tempC: 185 },
  { minutes: 45, tempC: 205 },
  { minutes: 53, tempC: 220 },
]

const holdOf = ({ minutes, tempC }: { minutes: number; tempC: number }) => [
  { timeS: 0, tempC },
  { timeS: minutes * 60, tempC },
]

export function Dose({ rules: { dose }, unit }: Props) {
  const ref = formatTemp(dose.refTempC, unit)
  const ramp = [
    { timeS: 0, tempC: 150 },
    { timeS: 600, tempC: 200 },
  ]
  return (
    <Part id="dose" title="Heat dose">
      <p>
        Temperature and time folded into one number: minutes at {ref}. One minute at {ref} counts one minute;
        one minute at {formatTemp(dose.refTempC + dose.zC, unit)}, which is{' '}
        {formatTempDifference(dose.zC, unit)} more, counts ten. Wood below {formatTemp(dose.baseTempC, unit)}{' '}
        counts nothing.
      </p>
      <Formula>{`rate r = 10^((T - Tref) / z), none below the base
dose over a straight piece = minutes × (r2 - r1) / ln(r2 / r1)`}</Formula>
      <Worked>
        Ten minutes climbing straight from {formatTemp(150, unit)} (rate{' '}
        {formatNumber(doseRate(dose, 150), 3)}) to {formatTemp(200, unit)} (rate{' '}
        {formatNumber(doseRate(dose, 200), 3)}) give {formatDoseFigure(equivalentMinutes(dose, ramp))} min at{' '}
        {ref}.
      </Worked>
      <Table
        caption="Dose of some holds"
        isCaptionShown
        rows={holds}
        rowKey={(hold) => String(hold.tempC)}
        columns={[
          {
            key: 'hold',
            head: 'Hold',
            isRowHead: true,
            cell: (hold) => `${hold.minutes} min at ${formatTemp(hold.tempC, unit)}`,
          },
          {
            key: 'dose',
            head: 'Dose',
            unit: `min at ${ref}`,
            isNumeric: true,
            cell: (hold) => formatDoseFigure(equivalentMinutes(dose, holdOf(hold))),
          },
          {
            key: 'severity',
            head: 'log10 of severity',
            isNumeric: true,
            cell: (hold) => formatNumber(log10Severity(holdOf(hold)), 2),
          },
        ]}
      />
      <p>
        The scored dose runs from toast start to rest start; what the bend and the rest add is shown beside
        it. It is the dose at the lead probe’s depth and at no other: doses of two places are never compared.
        Doses are compared as log10, because they scatter by shares, not by minutes.
      </p>
      <Constants
        of="heat dose"
        rows={[
          { name: 'Reference', value: ref, source: 'this site’s settings' },
          { name: 'z', value: formatTempDifference(dose.zC, unit), source: 'this site’s settings' },
          { name: 'Base', value: formatTemp(dose.baseTempC, unit), source: 'this site’s settings' },
        ]}
      />
      <Limit>
        With z {formatNumber(14.75 * Math.LN10, 3)} °C this is the severity factor of Overend and Chornet
        (1987) on another scale. An activation energy of 126 kJ/mol at {formatTemp(200, unit)} is z{' '}
        {formatNumber(zCFromActivationEnergy(126_000, 200), 1)} °C.
      </Limit>
    </Part>
  )
}

/** A hold of 20 minutes at 200 °C with a class 1 probe of type K that has not been checked. */
function workedInterval(rules: SiteRules) {
  return doseInterval({
    timeS: [0, 1200],
    tempC: [200, 200],
    model: rules.dose,
    probe: { type: 'K', iecClass: 1, check: null },
    errors: rules.errors,
    gaps: null,
  })
}

export function Intervals({ rules, unit }: Props) {
  const { errors, dose } = rules
  const worked = workedInterval(rules)
  return (
    <Part id="intervals" title="How sure a dose is">
      <p>
        Every dose has two intervals (k = 2). Each error is taken as one fixed offset for the whole firing,
        never averaged away over readings: the curve is shifted by it and integrated again, and the widths are
        added as squares. One degree Celsius all along is {formatNumber(percentOfDosePerC(dose))} % of dose.
      </p>
      <p>
        <strong>Same mount</strong>, for judging against the recipe and comparing barrels: what the same
        probe, placed again, could have read, and gaps
        {errors.isSameMountAssumed
          ? '. Assumed, until this room has measured its own repeatability; the figure covers drift.'
          : ', and drift between checks. Measured in this room.'}
      </p>
      <p>
        <strong>Absolute</strong>, for certificates: the probe (its check, or its class beyond the checked
        span or after the check is due), the cold junction, how the probe sits in its hole, and gaps.
      </p>
      <Worked>
        Twenty minutes held at {formatTemp(200, unit)} are {formatDoseFigure(worked.doseMin)} min. Same mount:{' '}
        {formatDoseFigure(worked.sameMount.lowMin)} to {formatDoseFigure(worked.sameMount.highMin)}.
        {worked.absolute === null
          ? ''
          : ` Absolute, with an unchecked class 1 probe of type K: ${formatDoseFigure(worked.absolute.lowMin)} to ${formatDoseFigure(worked.absolute.highMin)}.`}
      </Worked>
      <Constants
        of="errors"
        rows={[
          {
            name: 'Same mount',
            value: `±${formatNumber(errors.sameMountLog10, 3)} log10`,
            source: errors.isSameMountAssumed ? 'assumed' : 'measured in this room',
          },
          {
            name: 'Cold junction',
            value: `±${formatTempDifference(errors.coldJunctionC, unit, 1)}`,
            source: 'judgement, this site’s settings',
          },
          {
            name: 'Mount',
            value: `±${formatTempDifference(errors.mountC, unit, 1)}`,
            source: 'judgement, this site’s settings',
          },
          {
            name: 'Drift between checks',
            value: `±${formatTempDifference(errors.driftC, unit, 1)}`,
            source: 'judgement, this site’s settings',
          },
        ]}
      />
      <Limit>
        No verdict is firmer than its interval, and a recipe is approved only with a tolerance of at least
        twice the same-mount interval: ±{formatNumber(smallestHonestTolerance(rules), 3)} log10 is the least
        that this room can ask.
      </Limit>
    </Part>
  )
}

export function Indices({ rules: { indices, dose }, unit }: Props) {
  const kJ = (jPerMol: number) => `${formatNumber(jPerMol / 1000, 1)} kJ/mol`
  const low = holdOf({ minutes: 45, tempC: 185 })
  const high = holdOf({ minutes: 45 * doseRate(dose, 185) * (1 / doseRate(dose, 205)), tempC: 205 })
  const of = (jPerMol: number, points: { timeS: number; tempC: number }[]) =>
    formatNumber(arrheniusEquivalentMinutes(jPerMol, dose.refTempC, points), 1)
  return (
    <Part id="indices" title="Slow and fast index">
      <p>
        The same sum by two other laws, in minutes at {formatTemp(dose.refTempC, unit)}. A long low fire
        raises the slow one, a short hot fire the fast one, though the dose agrees.
      </p>
      <Formula>rate = exp(-(Ea / R) × (1 / T - 1 / Tref)), T in kelvin, R 8.314 J/(mol K)</Formula>
      <Worked>
        45 min at {formatTemp(185, unit)}: slow {of(indices.slowJPerMol, low)}, fast{' '}
        {of(indices.fastJPerMol, low)}. The same dose in {formatNumber((high[1]?.timeS ?? 0) / 60, 1)} min at{' '}
        {formatTemp(205, unit)}: slow {of(indices.slowJPerMol, high)}, fast {of(indices.fastJPerMol, high)}.
      </Worked>
      <Constants
        of="indices"
        rows={[
          {
            name: 'Slow, Ea',
            value: kJ(indices.slowJPerMol),
            source: 'two-step torrefaction of willow, Prins and others 2006',
          },
          { name: 'Fast, Ea', value: kJ(indices.fastJPerMol), source: 'the same' },
        ]}
      />
      <Limit>
        Illustrative: the constants were fitted at {formatTemp(230, unit)} to {formatTemp(300, unit)} and are
        extrapolated here. Neither means deep.
      </Limit>
    </Part>
  )
}
