import { Facts } from '@/components/ui/facts'
import { Part } from '@/components/numbers/part'
import { Table } from '@/components/ui/table'
import { formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { ruleset1 } from '@/lib/science/score-ruleset'
import type { SiteRules } from '@/lib/science/site-rules'

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

export function Ruleset({ unit }: { unit: TemperatureUnit }) {
  return (
    <Part id="score" title={`Score: ruleset ${ruleset1.number}`}>
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
      <p>
        Between the two, points fall in a straight line. A term that cannot be measured is left out and the
        rest scaled to 100; the firing’s page says so. A ruleset is never edited: a new one is a new number,
        and its score stands beside the old.
      </p>
    </Part>
  )
}

export function Verdicts({ rules: { limits } }: { rules: SiteRules }) {
  return (
    <Part id="verdict" title="The verdict">
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

function seconds(value: number): string {
  return value < 120
    ? `${formatNumber(value)} s`
    : `${formatNumber(value / 60, value % 60 === 0 ? 0 : 1)} min`
}

export function Gaps({ rules: { gaps, noReadingSilenceS } }: { rules: SiteRules }) {
  return (
    <Part id="gaps" title="Gaps">
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
