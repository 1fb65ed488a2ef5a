import Link from 'next/link'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { formatDoseFigure } from '@/lib/format'
import type { FitResult } from '@/lib/markers/schema'
import { predictors } from '@/lib/science/marker-families'
import type { PredictorKey } from '@/lib/science/marker-families'
import { threeDigits } from '@/lib/science/three-digits'

/** The results that a fit rests on, as they were typed, each with its barrel's firing. */
export function ResultTable({
  results,
  residuals,
  keys,
  unit,
}: {
  results: readonly FitResult[]
  residuals: readonly { fitted: number; residual: number | null }[]
  keys: readonly PredictorKey[]
  unit: string
}) {
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
      cell: (row) => (row.fitted === undefined ? '' : threeDigits(row.fitted)),
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
          threeDigits(row.residual)
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
