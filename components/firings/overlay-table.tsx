import Link from 'next/link'
import type { ReactNode } from 'react'
import { SketchPair } from '@/components/firings/sketch-pair'
import { overlayHref } from '@/components/firings/overlay-ids'
import { overlayNames } from '@/components/firings/overlay-pair'
import { showMeasured, showPoints } from '@/components/firings/term-table'
import { DoseFigure } from '@/components/ui/dose-figure'
import { VerdictText } from '@/components/ui/verdict-text'
import type { ComparedFiring, Comparison } from '@/lib/firings/compare-firings'
import { formatDoseFigure, formatInstant, formatMinutes, formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { ruleset1 } from '@/lib/science/score-ruleset'

type Row = { name: ReactNode; key: string; cell: (one: ComparedFiring) => ReactNode }

/** A column a firing, a row a figure. */
export function OverlayTable({
  comparison,
  pickedId,
  unit,
}: {
  comparison: Comparison
  pickedId: string | null
  unit: TemperatureUnit
}) {
  const { firings, timeZone } = comparison
  const names = overlayNames(firings)
  const refTempC = firings[0]?.rules.dose.refTempC ?? 200
  const rows = [...originRows(timeZone), ...doseRows(refTempC, unit), ...termRows(unit)]
  return (
    <div className="mt-5 overflow-x-auto" role="region" aria-label="Figures side by side" tabIndex={0}>
      <table className="w-full border-collapse">
        <caption className="mb-1 text-left font-[640]">Side by side</caption>
        <thead>
          <tr className="border-b border-line align-bottom">
            <td className="py-2 pr-5" />
            {firings.map((one) => (
              <ColumnHead
                key={one.firing.id}
                one={one}
                name={names.get(one.firing.id) ?? ''}
                ids={firings.map((each) => each.firing.id)}
                pickedId={pickedId}
                unit={unit}
              />
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.key} className="border-b border-line align-top">
              <th scope="row" className="py-[5.5px] pr-5 text-left font-normal text-soft">
                {row.name}
              </th>
              {firings.map((one) => (
                <td key={one.firing.id} className="py-[5.5px] pr-5 text-right tabular-nums">
                  {row.cell(one)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

function ColumnHead({
  one,
  name,
  ids,
  pickedId,
  unit,
}: {
  one: ComparedFiring
  name: string
  ids: readonly string[]
  pickedId: string | null
  unit: TemperatureUnit
}) {
  const { firing } = one
  const isPicked = firing.id === pickedId
  return (
    <th scope="col" className="py-2 pr-5 text-right font-normal">
      <span className="flex justify-end">
        <SketchPair sketch={firing.score?.sketch} title={`Barrel ${firing.piece.serial}`} unit={unit} />
      </span>
      <Link
        href={`/firings/${firing.id}`}
        className={`font-[640] whitespace-nowrap underline-offset-3 hover:underline ${isPicked ? 'text-water' : ''}`}
      >
        {name}
      </Link>
      <span className="block text-small no-print">
        <Link className="link" href={overlayHref(ids, isPicked ? null : firing.id)} scroll={false}>
          {isPicked ? 'Put back' : 'Pick out'}
          <span className="sr-only"> {name}</span>
        </Link>
        {', '}
        <Link
          className="link"
          href={overlayHref(
            ids.filter((id) => id !== firing.id),
            pickedId,
          )}
          scroll={false}
        >
          take out<span className="sr-only"> {name}</span>
        </Link>
      </span>
    </th>
  )
}

function originRows(timeZone: string): Row[] {
  return [
    {
      key: 'toast',
      name: `Toast started (${timeZone})`,
      cell: ({ firing }) =>
        firing.toastAt === null ? '' : formatInstant(firing.toastAt, timeZone, 'dateTime'),
    },
    { key: 'hearth', name: 'Hearth', cell: ({ firing }) => firing.hearthNumber },
    { key: 'toaster', name: 'Toaster', cell: ({ firing }) => firing.toaster?.name },
    { key: 'lot', name: 'Wood lot', cell: ({ firing }) => firing.batch.woodLot },
    {
      key: 'recipe',
      name: 'Recipe',
      cell: ({ firing }) => `${firing.recipe.name}, version ${firing.recipe.versionNumber}`,
    },
    {
      key: 'length',
      name: 'Toast took',
      cell: ({ curves }) => formatMinutes(curves.lead.timeS.at(-1) ?? 0),
    },
  ]
}

function doseRows(refTempC: number, unit: TemperatureUnit): Row[] {
  const none = <span className="text-mute">not scored</span>
  return [
    {
      key: 'verdict',
      name: 'Verdict',
      cell: ({ score }) => <VerdictText verdict={score?.verdict ?? null} />,
    },
    {
      key: 'points',
      name: 'Points',
      cell: ({ score }) => (score === null || score.points === null ? none : showPoints(score.points)),
    },
    {
      key: 'dose',
      name: `Dose, min at ${formatTemp(refTempC, unit)}`,
      cell: ({ score }) => {
        if (score === null || score.verdict === 'incomplete') return none
        const range = score.result.dose?.sameMount ?? null
        return <DoseFigure equivalentMin={score.doseMinutes} range={range} unit={unit} isUnitHidden />
      },
    },
    { key: 'plan', name: 'Plan’s dose', cell: ({ curves }) => formatDoseFigure(curves.planDoseMin) },
    {
      key: 'depth',
      name: 'Toasted to, mm (model)',
      cell: ({ score }) => {
        const depth = score?.result.toastDepthMm ?? null
        if (depth === null) return none
        const show = (mm: number) => formatNumber(Math.round(mm * 2) / 2, 1)
        return `${show(depth.value)} (${show(depth.low)} to ${show(depth.high)})`
      },
    },
  ]
}

function termRows(unit: TemperatureUnit): Row[] {
  return ruleset1.termOrder.map((key) => ({
    key: `term ${key}`,
    name: ruleset1.terms[key].name,
    cell: ({ score }) => {
      const term = score?.result.terms.find((one) => one.key === key)
      if (term === undefined || term.pointsLost === null) return <span className="text-mute">left out</span>
      return (
        <>
          {showMeasured(term, unit)}
          <span className="block text-small text-mute">
            {showPoints(term.pointsOf - term.pointsLost)} of {term.pointsOf}
          </span>
        </>
      )
    },
  }))
}
