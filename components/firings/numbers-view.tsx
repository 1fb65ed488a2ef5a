import type { ReactNode } from 'react'
import { Facts } from '@/components/ui/facts'
import { PageHead } from '@/components/ui/page-head'
import { Table } from '@/components/ui/table'
import { formatNumber, formatTemp, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { ruleset1 } from '@/lib/science/score-ruleset'
import type { SiteRules } from '@/lib/science/site-rules'

type Props = { rules: SiteRules; unit: TemperatureUnit }

/** Ruleset 1, the dose, its intervals, gaps and the stave model in words, with this site's constants. */
export function NumbersView({ rules, unit, siteVersion }: Props & { siteVersion: number }) {
  return (
    <>
      <PageHead
        title="How the numbers are made"
        sub={`Ruleset ${ruleset1.number}, with the constants of this site’s settings, version ${siteVersion}. A score names both and keeps them: later settings never change it.`}
      />
      <div className="grid max-w-[74rem] gap-x-12 gap-y-7 lg:grid-cols-2">
        <Dose rules={rules} unit={unit} />
        <Intervals rules={rules} unit={unit} />
        <div className="lg:col-span-2">
          <Ruleset unit={unit} />
        </div>
        <Verdicts rules={rules} />
        <Gaps rules={rules} />
        <Stave rules={rules} unit={unit} />
        <Indices rules={rules} unit={unit} />
      </div>
    </>
  )
}

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section>
      <h2 className="mb-2">{title}</h2>
      <div className="max-w-[64ch] space-y-2">{children}</div>
    </section>
  )
}

function Formula({ children }: { children: string }) {
  return <p className="font-mono text-small">{children}</p>
}

function seconds(value: number): string {
  return value < 120
    ? `${formatNumber(value)} s`
    : `${formatNumber(value / 60, value % 60 === 0 ? 0 : 1)} min`
}

function Dose({ rules: { dose }, unit }: Props) {
  const ref = formatTemp(dose.refTempC, unit)
  const higher = formatTemp(dose.refTempC + dose.zC, unit)
  return (
    <Part title="Heat dose">
      <p>
        Temperature and time folded into one number: minutes at {ref}. One minute at {ref} counts one minute;
        one minute at {higher}, which is {formatTempDifference(dose.zC, unit)} more, counts ten. Wood below{' '}
        {formatTemp(dose.baseTempC, unit)} counts nothing.
      </p>
      <Formula>rate = 10^((T - Tref) / z), dose = rate summed over minutes</Formula>
      <p>
        Between two readings the temperature is taken as a straight line, and its dose is exact. The scored
        dose runs from toast start to rest start; what the bend and the rest add is shown beside it. It is the
        dose at the lead probe’s depth, and at no other: doses of two places are never compared.
      </p>
      <p className="text-soft">
        With z 34 at 200 °C this is the severity factor of Overend and Chornet (1987) on another scale.
      </p>
    </Part>
  )
}

function Intervals({ rules: { errors, dose }, unit }: Props) {
  const percent = (10 ** errors.sameMountLog10 - 1) * 100
  return (
    <Part title="How sure it is">
      <p>
        Every dose has two intervals (k = 2). Each error is taken as one fixed offset for the whole firing,
        never averaged away over readings: the curve is shifted by it and integrated again, and the widths are
        added as squares. One degree Celsius all along is {formatNumber((10 ** (1 / dose.zC) - 1) * 100)} % of
        dose.
      </p>
      <p>
        <strong>Same mount</strong>, for judging against the recipe and comparing barrels: what the same
        probe, placed again, could have read, ±{formatNumber(errors.sameMountLog10, 3)} in log10, about{' '}
        {formatNumber(percent)} %, and gaps
        {errors.isSameMountAssumed
          ? '. Assumed, until this room has measured its own repeatability; the figure covers drift.'
          : `, and ${formatTempDifference(errors.driftC, unit, 1)} of drift between checks. Measured in this room.`}
      </p>
      <p>
        <strong>Absolute</strong>, for certificates: the probe (its check, or its IEC class beyond the checked
        span or after the check is due), the cold junction{' '}
        {formatTempDifference(errors.coldJunctionC, unit, 1)}, how the probe sits in its hole{' '}
        {formatTempDifference(errors.mountC, unit, 1)} (judgement), and gaps.
      </p>
      <p>No verdict is firmer than its interval.</p>
    </Part>
  )
}

type TermRow = { name: string; measure: string; noLoss: string; allLost: string; points: number }

function termRows(unit: TemperatureUnit): TermRow[] {
  const { terms, countFromTempC, rampBandMin } = ruleset1
  const above = formatTemp(countFromTempC, unit)
  const times = (count: number) => (count === 1 ? '' : `${count} × `)
  return [
    {
      name: terms.dose.name,
      measure: 'Distance of the dose from its target, in log10, either way',
      noLoss: `${times(terms.dose.noLossTimes)}the recipe’s tolerance`,
      allLost: `${times(terms.dose.allLostTimes)}the tolerance`,
      points: terms.dose.points,
    },
    {
      name: terms.inBand.name,
      measure: `Share of the time above ${above} inside the band. On a ramp the band is the wider of ±degrees and ±${rampBandMin} min along time`,
      noLoss: `${terms.inBand.noLoss} % or more`,
      allLost: `${terms.inBand.allLost} % or less`,
      points: terms.inBand.points,
    },
    {
      name: terms.shape.name,
      measure: `Root mean square of the distance from the plan, in bands, above ${above}, each stage laid on its own`,
      noLoss: `${terms.shape.noLoss} band`,
      allLost: `${terms.shape.allLost} bands`,
      points: terms.shape.points,
    },
    {
      name: terms.stageLengths.name,
      measure: 'The stage furthest off its planned minutes, by the toaster’s marks',
      noLoss: `${terms.stageLengths.noLoss} %`,
      allLost: `${terms.stageLengths.allLost} %`,
      points: terms.stageLengths.points,
    },
    {
      name: terms.spread.name,
      measure: 'Mean difference of the two opposite probes at one height',
      noLoss: `${times(terms.spread.noLossTimes)}the recipe’s limit`,
      allLost: `${times(terms.spread.allLostTimes)}the limit`,
      points: terms.spread.points,
    },
    {
      name: terms.preheatAndBend.name,
      measure: 'The worst of stave moisture, preheat minutes and pull minutes',
      noLoss: 'all in the recipe’s range',
      allLost: `minutes at ${terms.preheatAndBend.allLostMinutesTimes * 100} % of the least, or moisture ${terms.preheatAndBend.allLostMoisturePercent} % points out`,
      points: terms.preheatAndBend.points,
    },
  ]
}

function Ruleset({ unit }: { unit: TemperatureUnit }) {
  return (
    <section>
      <h2 className="mb-2">Ruleset {ruleset1.number}: points</h2>
      <Table
        caption={`Terms of ruleset ${ruleset1.number}`}
        rows={termRows(unit)}
        rowKey={(row) => row.name}
        columns={[
          { key: 'name', head: 'Term', isRowHead: true, cell: (row) => row.name },
          { key: 'measure', head: 'Measured', cell: (row) => row.measure },
          { key: 'noLoss', head: 'No loss within', cell: (row) => row.noLoss },
          { key: 'allLost', head: 'All lost at', cell: (row) => row.allLost },
          { key: 'points', head: 'Points', isNumeric: true, cell: (row) => row.points },
        ]}
      />
      <p className="mt-2 max-w-[100ch]">
        Between the two, points fall in a straight line. A term that cannot be measured is left out and the
        rest scaled to 100; the firing’s page says so. A ruleset is never edited: a new one is a new number,
        and its score stands beside the old.
      </p>
    </section>
  )
}

function Verdicts({ rules: { limits } }: { rules: SiteRules }) {
  return (
    <Part title="The verdict">
      <p>
        The verdict stands apart from the points, and they never overrule it. The first that holds is said:
      </p>
      <Facts
        isRuled
        facts={[
          { name: 'Incomplete', value: 'the record does not allow a score.' },
          {
            name: 'Limit broken',
            value: `the wood stood above its maximum for over ${limits.woodMaxHeldS} s, or climbed faster than its maximum over ${limits.climbWindowS} s.`,
          },
          { name: 'Out of tolerance', value: 'the whole same-mount interval lies outside the tolerance.' },
          { name: 'Cannot tell', value: 'the interval reaches across the edge of the tolerance.' },
          { name: 'In tolerance', value: 'the whole interval lies inside it.' },
        ]}
      />
    </Part>
  )
}

function Gaps({ rules: { gaps, noReadingSilenceS } }: { rules: SiteRules }) {
  return (
    <Part title="Gaps">
      <p>
        A silence of the lead probe longer than {formatNumber(gaps.gapFromSpacings)} times its usual spacing
        is a gap.
      </p>
      <Facts
        isRuled
        facts={[
          {
            name: `Up to ${seconds(gaps.interpolateUpToS)}`,
            value: 'joined by a straight line, drawn dotted.',
          },
          {
            name: `Up to ${seconds(gaps.widenUpToS)}`,
            value:
              'joined, and the interval of the dose is widened to both extremes: the lower end held, and the higher of plan and ends.',
          },
          {
            name: 'Longer',
            value: `left open; the firing is incomplete. So it is when gaps take over ${formatNumber(gaps.incompleteAboveShare * 100)} % of the toast.`,
          },
        ]}
      />
      <p>
        A marked turn-over silences NO READING for {noReadingSilenceS} s; the gap still counts. The last value
        is never shown as live.
      </p>
    </Part>
  )
}

function Stave({ rules: { stave }, unit }: Props) {
  const room = formatTemp(stave.roomTempC, unit)
  return (
    <Part title="Inside the stave (model)">
      <p>
        Nobody can see the dose inside the wood, so it is computed: heat is conducted through the thickness
        from the lead probe’s reading, imposed at its depth, to the cold face, which loses{' '}
        {formatNumber(stave.coldFaceHWPerM2K)} W/(m²·K) to a room of {room}. Conductivity, heat capacity and
        density are the Wood Handbook’s for oak of specific gravity {formatNumber(stave.specificGravity, 2)};
        moisture, {formatNumber(stave.moisturePercent)} % when it was not measured, dries out on the way and
        takes its heat with it.
      </p>
      <p>
        <strong>Toast depth</strong> is the deepest wood whose dose is at least{' '}
        {formatNumber(stave.toastDepthDoseMin, 2)} min, shown to half a millimetre. Its range comes from the
        probe’s depth (±{formatNumber(stave.probeDepthErrorMm, 1)} mm), the wood’s diffusivity (±
        {formatNumber(stave.diffusivityErrorShare * 100)} %, judgement) and the probe’s error. It is an
        estimate, to be calibrated on cut offcuts.
      </p>
    </Part>
  )
}

function Indices({ rules: { indices, dose }, unit }: Props) {
  const kJ = (jPerMol: number) => formatNumber(jPerMol / 1000, 1)
  return (
    <Part title="Slow and fast index">
      <p>
        The same sum with two other laws, of {kJ(indices.slowJPerMol)} and {kJ(indices.fastJPerMol)} kJ/mol
        (two-step torrefaction of willow, Prins and others 2006), in minutes at{' '}
        {formatTemp(dose.refTempC, unit)}. A long low fire raises the slow one, a short hot fire the fast one,
        though the dose agrees.
      </p>
      <p>
        Illustrative: the constants were fitted at {formatTemp(230, unit)} to {formatTemp(300, unit)} and are
        extrapolated here. Neither means deep.
      </p>
    </Part>
  )
}
