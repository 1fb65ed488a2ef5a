'use client'

import { Button } from '@/components/ui/button'
import { NumberField } from '@/components/ui/number-field'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import { limitKinds } from '@/lib/site/room-settings'
import type { CarbonMonoxideLimit } from '@/lib/site/room-settings'

const path = 'room.exposure.carbonMonoxideLimits'
const mostLimits = 8
const options = limitKinds.map((kind) => ({ value: kind, label: kind }))

/** The site's limits for carbon monoxide, each with where it stands. */
export function LimitTable({
  limits,
  onLimits,
  fields,
  isReadOnly,
}: {
  limits: readonly CarbonMonoxideLimit[]
  onLimits: (limits: CarbonMonoxideLimit[]) => void
  fields: Readonly<Record<string, string>>
  isReadOnly: boolean
}) {
  const change = (index: number, part: Partial<CarbonMonoxideLimit>) =>
    onLimits(limits.map((limit, at) => (at === index ? { ...limit, ...part } : limit)))
  return (
    <div className="min-w-0 sm:col-span-2 lg:col-span-3">
      <div className="overflow-x-auto" role="region" aria-label="Limits for carbon monoxide" tabIndex={0}>
        <table className="w-full min-w-[46rem] border-collapse">
          <caption className="mb-1 text-left text-small font-[560]">Limits for carbon monoxide</caption>
          <thead className="text-left text-small text-soft">
            <tr className="border-b border-line">
              <th scope="col" className="w-36 py-1 pr-3 font-normal">
                Name
              </th>
              <th scope="col" className="w-40 py-1 pr-3 font-normal">
                Kind
              </th>
              <th scope="col" className="w-28 py-1 pr-3 text-right font-normal">
                ppm
              </th>
              <th scope="col" className="py-1 pr-3 font-normal">
                Where it stands
              </th>
              {isReadOnly ? null : (
                <th scope="col" className="w-20 py-1 font-normal">
                  <span className="sr-only">Leave out</span>
                </th>
              )}
            </tr>
          </thead>
          <tbody>
            {limits.map((limit, index) => (
              <LimitRow
                key={index}
                limit={limit}
                index={index}
                fields={fields}
                isReadOnly={isReadOnly}
                onChange={(part) => change(index, part)}
                onLeaveOut={
                  limits.length === 1 ? undefined : () => onLimits(limits.filter((_, at) => at !== index))
                }
              />
            ))}
          </tbody>
        </table>
      </div>
      {isReadOnly || limits.length >= mostLimits ? null : (
        <Button
          kind="quiet"
          className="mt-2"
          onClick={() =>
            onLimits([...limits, { name: '', kind: '8-hour mean', ppm: Number.NaN, source: '' }])
          }
        >
          Add a limit
        </Button>
      )}
      {fields[path] === undefined ? null : (
        <p className="mt-1 text-small font-[560] text-red">{fields[path]}</p>
      )}
    </div>
  )
}

function LimitRow({
  limit,
  index,
  fields,
  isReadOnly,
  onChange,
  onLeaveOut,
}: {
  limit: CarbonMonoxideLimit
  index: number
  fields: Readonly<Record<string, string>>
  isReadOnly: boolean
  onChange: (part: Partial<CarbonMonoxideLimit>) => void
  /** Left out for the last one: a site keeps at least one limit. */
  onLeaveOut: (() => void) | undefined
}) {
  const frame = (key: string, label: string) => ({
    name: `${path}.${index}.${key}`,
    label: `${label} of limit ${index + 1}`,
    isLabelHidden: true,
    readOnly: isReadOnly,
    error: fields[`${path}.${index}.${key}`],
  })
  const { readOnly, ...kindFrame } = frame('kind', 'Kind')
  return (
    <tr className="border-b border-line align-top">
      <td className="py-2 pr-3">
        <TextField
          {...frame('name', 'Name')}
          value={limit.name}
          onChange={(event) => onChange({ name: event.target.value })}
        />
      </td>
      <td className="py-2 pr-3">
        <SelectField
          {...kindFrame}
          disabled={readOnly}
          options={options}
          value={limit.kind}
          onChange={(event) =>
            onChange({ kind: limitKinds.find((kind) => kind === event.target.value) ?? limit.kind })
          }
        />
      </td>
      <td className="py-2 pr-3">
        <NumberField
          {...frame('ppm', 'ppm')}
          isRequired
          min={0}
          max={5000}
          value={Number.isFinite(limit.ppm) ? limit.ppm : null}
          onValueChange={(ppm) => onChange({ ppm: ppm ?? Number.NaN })}
        />
      </td>
      <td className="py-2 pr-3">
        <TextField
          {...frame('source', 'Where it stands, source')}
          value={limit.source}
          onChange={(event) => onChange({ source: event.target.value })}
        />
      </td>
      {isReadOnly ? null : (
        <td className="py-2">
          {onLeaveOut === undefined ? null : (
            <Button kind="quiet" onClick={onLeaveOut} className="mt-[6px]">
              Leave out<span className="sr-only"> limit {index + 1}</span>
            </Button>
          )}
        </td>
      )}
    </tr>
  )
}
