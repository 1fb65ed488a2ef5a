'use client'

import { SelectField } from '@/components/ui/select-field'
import type { ExposureKind, ExposurePreview, FileColumns } from '@/lib/conditions/schema'
import { formatCount, formatInstant, formatNumber } from '@/lib/format'

/** What a file would give: how many readings from when to when, its first lines, and each line that cannot be read. */
export function ExposureFilePreview({
  seen,
  kind,
  zone,
  onColumns,
}: {
  seen: ExposurePreview
  kind: ExposureKind
  zone: string
  onColumns: (columns: FileColumns) => void
}) {
  const unit = kind === 'heat' ? '°C WBGT' : 'ppm'
  const options = seen.columns.map((name) => ({ value: name, label: name }))
  return (
    <div className="border-t border-line pt-3">
      <p>
        <strong>{formatCount(seen.readingCount, 'reading')}</strong>
        {seen.firstAt === null || seen.lastAt === null
          ? ''
          : `, ${formatInstant(seen.firstAt, zone)} to ${formatInstant(seen.lastAt, zone)}`}
        {seen.peak === null ? '' : `, highest ${formatNumber(seen.peak, 1)} ${unit}`}.
        {seen.minuteCount === seen.readingCount
          ? ''
          : ` They are kept as ${formatCount(seen.minuteCount, 'minute')}, each with its mean and its peak.`}
        {seen.alreadyThere === 0
          ? ''
          : ` ${formatCount(seen.alreadyThere, 'is', 'are')} kept already and not added again.`}
      </p>
      <div className="mt-2 grid grid-cols-2 gap-4">
        <SelectField
          name="columns.time"
          label="Column of times"
          options={options}
          value={seen.chosen.time ?? ''}
          onChange={(event) => onColumns({ time: event.target.value })}
        />
        {seen.chosen.value === undefined ? (
          <p className="self-end pb-2 text-soft">
            WBGT from {seen.chosen.wetBulb} and {seen.chosen.globe}
          </p>
        ) : (
          <SelectField
            name="columns.value"
            label={`Column of readings, ${unit}`}
            options={options}
            value={seen.chosen.value}
            onChange={(event) => onColumns({ value: event.target.value })}
          />
        )}
      </div>
      <Sample seen={seen} zone={zone} unit={unit} />
      {seen.faultCount === 0 ? null : <Faults seen={seen} />}
    </div>
  )
}

function Sample({ seen, zone, unit }: { seen: ExposurePreview; zone: string; unit: string }) {
  if (seen.sample.length === 0) return null
  return (
    <table className="mt-3 w-full border-collapse text-small">
      <caption className="mb-1 text-left text-soft">First lines as they are read, times in {zone}</caption>
      <thead className="text-left text-soft">
        <tr className="border-b border-line">
          <th scope="col" className="w-16 font-normal">
            Line
          </th>
          <th scope="col" className="font-normal">
            Time
          </th>
          <th scope="col" className="text-right font-normal">
            {unit}
          </th>
        </tr>
      </thead>
      <tbody>
        {seen.sample.slice(0, 4).map(({ line, at, value }) => (
          <tr key={line} className="border-b border-line">
            <td className="tabular-nums">{line}</td>
            <td>
              {formatInstant(at, zone, 'date')}, {formatInstant(at, zone, 'seconds')}
            </td>
            <td className="text-right tabular-nums">{formatNumber(value, 1)}</td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}

function Faults({ seen }: { seen: ExposurePreview }) {
  const more = seen.faultCount - seen.faults.length
  return (
    <div
      className="mt-3 max-h-48 overflow-y-auto"
      role="region"
      aria-label="Lines that cannot be read"
      tabIndex={0}
    >
      <table className="w-full border-collapse text-small">
        <caption className="mb-1 text-left font-[560] text-red">
          {formatCount(seen.faultCount, 'line')} cannot be read
        </caption>
        <tbody>
          {seen.faults.map((fault) => (
            <tr key={fault.line} className="border-b border-line align-top">
              <th scope="row" className="w-16 text-left font-normal whitespace-nowrap tabular-nums">
                Line {fault.line}
              </th>
              <td className="px-3">
                {fault.column}: {fault.sentence}
              </td>
              <td className="text-right font-mono [overflow-wrap:anywhere]">
                {fault.text === '' ? '(nothing)' : fault.text}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      {more > 0 ? <p className="mt-1 text-small text-soft">and {more} more</p> : null}
    </div>
  )
}
