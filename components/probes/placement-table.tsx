'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { classNames } from '@/components/ui/class-names'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import type { Problem } from '@/components/ui/problem'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatNumber, formatSigned, toShownDifference, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { PlacementDto } from '@/lib/probes/study-schema'

/** Every placement; one that went wrong is struck out with its reason and stays in sight. */
export function PlacementTable({
  placements,
  zone,
  unit,
  onStrike,
}: {
  placements: readonly PlacementDto[]
  zone: string
  unit: TemperatureUnit
  onStrike: ((placementId: string, reason: string) => Promise<Problem | null>) | null
}) {
  const [striking, setStriking] = useState<PlacementDto | null>(null)

  async function strike(reason: string) {
    if (striking === null || onStrike === null) return null
    const problem = await onStrike(striking.id, reason)
    if (problem === null) setStriking(null)
    return problem
  }

  return (
    <>
      <Table
        caption="Placements"
        rows={placements}
        rowKey={(one) => one.id}
        columns={[
          ...placementColumns(zone, unit),
          ...(onStrike === null ? [] : [strikeColumn((one) => setStriking(one))]),
        ]}
        empty={<p className="border-y border-line py-3 text-soft">None yet.</p>}
      />
      <ConfirmDialog
        isOpen={striking !== null}
        onClose={() => setStriking(null)}
        title={`Strike out placement ${striking?.position ?? ''}?`}
        confirmLabel="Strike out"
        isDanger
        reasonLabel="What went wrong"
        onConfirm={strike}
      >
        It stays in sight with your reason and does not count. A placement that only reads far off is no
        reason: that is what is being measured.
      </ConfirmDialog>
    </>
  )
}

function placementColumns(zone: string, unit: TemperatureUnit): Column<PlacementDto>[] {
  const faint = (one: PlacementDto, words: React.ReactNode) => (
    <span className={classNames(one.struck !== null && 'text-mute line-through')}>{words}</span>
  )
  const shown = (tempC: number) => formatNumber(toShownTemp(tempC, unit), 2)
  return [
    { key: 'no', head: 'No.', isRowHead: true, cell: (one) => faint(one, one.position) },
    { key: 'at', head: 'When', cell: (one) => <Time at={one.placedAt} zone={zone} /> },
    {
      key: 'placed',
      head: 'Placed probe',
      unit: unitName(unit),
      isNumeric: true,
      cell: (one) => faint(one, shown(one.placedTempC)),
    },
    {
      key: 'fixed',
      head: 'Probe that stays',
      unit: unitName(unit),
      isNumeric: true,
      cell: (one) => faint(one, shown(one.referenceTempC)),
    },
    {
      key: 'difference',
      head: 'Difference',
      unit: unitName(unit),
      isNumeric: true,
      cell: (one) => faint(one, formatSigned(toShownDifference(one.differenceC, unit), 2)),
    },
    {
      key: 'how',
      head: 'How',
      cell: (one) =>
        one.struck === null ? (
          `${one.way === 'live' ? 'settled readings' : 'by eye'}, ${one.placedBy}`
        ) : (
          <span className="text-soft">
            struck out by {one.struck.by}: {one.struck.reason}
          </span>
        ),
    },
  ]
}

function strikeColumn(onStrike: (one: PlacementDto) => void): Column<PlacementDto> {
  return {
    key: 'do',
    head: <span className="sr-only">Do</span>,
    className: 'text-right',
    cell: (one) =>
      one.struck !== null ? null : (
        <Button kind="quiet" onClick={() => onStrike(one)}>
          Strike out<span className="sr-only"> placement {one.position}</span>
        </Button>
      ),
  }
}
