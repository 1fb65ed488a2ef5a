import Link from 'next/link'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { formatDoseFigure, formatNumber } from '@/lib/format'
import type { FitResult } from '@/lib/markers/schema'
import { predictors } from '@/lib/science/marker-families'
import type { PredictorKey } from '@/lib/science/marker-families'

/** As many decimals as show the spread with two digits: more would be noise. */
function decimalsOf(residualSd: number): number {
  return residualSd > 0 ? Math.min(6, Math.max(0, 1 - Math.floor(Math.log10(residualSd)))) : 2
}

/** The results that a fit rests on, as they were typed, each with its barrel's firing. */
export function ResultTable({
  results,
  residuals,
  residualSd,
  keys,
  unit,
}: {
  results: readonly FitResult[]
  residuals: readonly { fitted: number; residual: number | null }[]
  residualSd: number
  keys: readonly PredictorKey[]
  unit: string
}) {
  const decimals = decimalsOf(residualSd)
  const rows = results.map((result, i) => ({ ...result, ...residuals[i] }))
  const columns: Column<(typeof rows)[number]>[] = [
    {
      key: 'source',
      head: 'Barrel',
      isRowHead: true,
      cell: (row) =>
        row.firingId === null ? (
          <span className="text-soft">typed dose</span>
        ) : (
          <Link href={`/firings/${row.firingId}`} className="link">
            {row.serial}
          </Link>
        ),
    },
    ...keys.map((key) => ({
      key,
      head: predictors[key].name.replace(/^./, (letter) => letter.toUpperCase()),
      unit: predictors[key].unit,
      isNumeric: true,
      cell: (row: (typeof rows)[number]) => {
        const value = row[key]
        if (value === null) return ''
        return key === 'toastDepthMm' ? value.toFixed(1) : formatDoseFigure(value)
      },
    })),
    { key: 'value', head: 'Result', unit, isNumeric: true, cell: (row) => row.typedValue },
    {
      key: 'fitted',
      head: 'By the fit',
      unit,
      isNumeric: true,
      cell: (row) => (row.fitted === undefined ? '' : formatNumber(row.fitted, decimals)),
    },
    {
      key: 'residual',
      head: 'Off',
      unit,
      isNumeric: true,
      cell: (row) =>
        row.residual === null || row.residual === undefined ? (
          <span className="text-soft">below the limit</span>
        ) : (
          formatNumber(row.residual, decimals)
        ),
    },
  ]
  return (
    <Table
      caption="Results that the fit rests on"
      columns={columns}
      rows={rows}
      rowKey={(row) => String(row.line)}
    />
  )
}
