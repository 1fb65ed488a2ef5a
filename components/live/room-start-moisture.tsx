'use client'

import { NumberField } from '@/components/ui/number-field'
import type { RecipeContent } from '@/lib/recipes/schema'

export const moistureMethods = ['meter', 'oven-dry'] as const
export type MoistureMethod = (typeof moistureMethods)[number]

/** Stave moisture and how it was measured; may be left out, and is then said to be unknown. */
export function RoomStartMoisture({
  value,
  onValue,
  method,
  onMethod,
  preheat,
  error,
}: {
  value: number | null
  onValue: (value: number | null) => void
  method: MoistureMethod
  onMethod: (method: MoistureMethod) => void
  preheat: RecipeContent['preheat'] | null
  error: string | undefined
}) {
  const isOff =
    preheat !== null &&
    value !== null &&
    (value < preheat.moistureMinPercent || value > preheat.moistureMaxPercent)
  return (
    <div className="mt-3">
      <div className="flex items-end gap-4">
        <NumberField
          name="moisturePercent"
          label="Stave moisture"
          isOptional
          unit="%"
          value={value}
          onValueChange={onValue}
          min={0}
          max={80}
          decimals={1}
          what="the moisture in %"
          error={error}
          className="w-[240px]"
        />
        <div role="radiogroup" aria-label="How it was measured" className="flex gap-2">
          {moistureMethods.map((one) => (
            <label
              key={one}
              className="control flex min-h-[85px] cursor-pointer items-center gap-3 px-4 has-checked:border-text!"
            >
              <input
                type="radio"
                name="moistureMethod"
                checked={method === one}
                onChange={() => onMethod(one)}
                className="size-[24px] accent-water"
              />
              {one}
            </label>
          ))}
        </div>
      </div>
      {preheat === null ? null : (
        <p className={isOff ? 'mt-1 font-[640] text-amber' : 'mt-1 text-soft'}>
          The recipe asks {preheat.moistureMinPercent} to {preheat.moistureMaxPercent} %.
          {isOff ? ' It can be fired so, and the score says it.' : ''}
        </p>
      )}
    </div>
  )
}
