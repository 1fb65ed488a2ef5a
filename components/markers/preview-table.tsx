import { Table } from '@/components/ui/table'
import { formatDoseFigure, formatNumber } from '@/lib/format'
import type { FitPreview, PreviewRow } from '@/lib/markers/schema'
import type { FamilyId, PredictorKey } from '@/lib/science/marker-families'
import { markerFamilies, predictors } from '@/lib/science/marker-families'

/** Every pasted row with what was found for it, or what is wrong and how to mend it. */
export function PreviewTable({
  preview,
  unit,
  family,
}: {
  preview: FitPreview
  unit: string
  family: FamilyId
}) {
  const keys = markerFamilies[family].predictors
  return (
    <Table
      caption="Rows as they were read"
      isCaptionShown
      rows={preview.rows}
      rowKey={(row) => String(row.line)}
      columns={[
        { key: 'line', head: 'Line', isNumeric: true, cell: (row) => row.line },
        {
          key: 'source',
          head: 'Barrel or dose',
          isRowHead: true,
          className: 'whitespace-nowrap',
          cell: (row) => row.result?.serial ?? row.typedSource,
        },
        ...keys.map((key) => ({
          key,
          head: predictors[key].name.replace(/^./, (letter) => letter.toUpperCase()),
          unit: predictors[key].unit,
          isNumeric: true,
          cell: (row: PreviewRow) => figureOf(row, key),
        })),
        { key: 'value', head: 'Result', unit, isNumeric: true, cell: (row) => row.typedValue },
        {
          key: 'error',
          head: <span className="sr-only">Read</span>,
          cell: (row) =>
            row.error === null ? (
              <span className="text-soft">{row.result?.isBelowLimit === true ? 'below the limit' : ''}</span>
            ) : (
              <span className="text-red">{row.error}</span>
            ),
        },
      ]}
    />
  )
}

function figureOf(row: PreviewRow, key: PredictorKey): string {
  const value = row.result?.[key] ?? null
  if (value === null) return ''
  return key === 'toastDepthMm' ? formatNumber(value, 1) : formatDoseFigure(value)
}
