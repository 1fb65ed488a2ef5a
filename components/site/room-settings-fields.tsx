'use client'

import type { ReactNode } from 'react'
import { NumberField } from '@/components/ui/number-field'
import { TextField } from '@/components/ui/text-field'
import type { RoomSettings } from '@/lib/site/room-settings'
import { LimitTable } from './limit-table'
import { WordList } from './word-list'

/** What the room keeps beside the curve: the site's own words, how readings are kept, and limits with their source. */
export function RoomSettingsFields({
  room,
  onChange,
  fields,
  isReadOnly,
}: {
  room: RoomSettings
  onChange: (room: RoomSettings) => void
  fields: Readonly<Record<string, string>>
  isReadOnly: boolean
}) {
  const { words, conditions, exposure } = room
  const numberFrame = { isRequired: true, readOnly: isReadOnly, decimals: 2 }
  return (
    <>
      <Group title="Words at the fireside" intro="Offered at a firing’s finish; any other words serve too.">
        <WordList
          name="room.words.colour"
          label="Colour"
          words={words.colour}
          onWords={(colour) => onChange({ ...room, words: { ...words, colour } })}
          error={wordError(fields, 'room.words.colour')}
          isReadOnly={isReadOnly}
        />
        <WordList
          name="room.words.smell"
          label="Smell"
          words={words.smell}
          onWords={(smell) => onChange({ ...room, words: { ...words, smell } })}
          error={wordError(fields, 'room.words.smell')}
          isReadOnly={isReadOnly}
        />
        <NumberField
          {...numberFrame}
          name="room.conditions.nearestWithinH"
          label="A reading of the air belongs to a firing within"
          hint="The nearest of the same day, counted from the toast start."
          unit="h"
          value={conditions.nearestWithinH}
          min={0.25}
          max={24}
          onValueChange={(value) =>
            onChange({ ...room, conditions: { nearestWithinH: value ?? Number.NaN } })
          }
          error={fields['room.conditions.nearestWithinH']}
        />
      </Group>
      <Group
        title="Carbon monoxide and heat"
        intro="A record and a reminder: the alarm that is worn decides. Keep here what local code asks, and where it stands."
      >
        <NumberField
          {...numberFrame}
          name="room.exposure.readingHoldsMin"
          label="A reading stands until the next, at most"
          hint="Time that no reading covers is said, and counts as nothing in the mean."
          unit="min"
          value={exposure.readingHoldsMin}
          min={1}
          max={480}
          onValueChange={(value) =>
            onChange({ ...room, exposure: { ...exposure, readingHoldsMin: value ?? Number.NaN } })
          }
          error={fields['room.exposure.readingHoldsMin']}
        />
        <NumberField
          {...numberFrame}
          name="room.exposure.metabolicRateW"
          label="Metabolic rate of the work"
          hint="The heat limits are taken at it; moderate work is about 300 W."
          unit="W"
          value={exposure.metabolicRateW}
          min={100}
          max={700}
          onValueChange={(value) =>
            onChange({ ...room, exposure: { ...exposure, metabolicRateW: value ?? Number.NaN } })
          }
          error={fields['room.exposure.metabolicRateW']}
        />
        <TextField
          name="room.exposure.heatSource"
          label="Where the heat limits stand"
          readOnly={isReadOnly}
          value={exposure.heatSource}
          onChange={(event) =>
            onChange({ ...room, exposure: { ...exposure, heatSource: event.target.value } })
          }
          error={fields['room.exposure.heatSource']}
        />
        <LimitTable
          limits={exposure.carbonMonoxideLimits}
          onLimits={(carbonMonoxideLimits) =>
            onChange({ ...room, exposure: { ...exposure, carbonMonoxideLimits } })
          }
          fields={fields}
          isReadOnly={isReadOnly}
        />
      </Group>
    </>
  )
}

/** An error of one word is shown at its list. */
function wordError(fields: Readonly<Record<string, string>>, path: string): string | undefined {
  return fields[path] ?? Object.entries(fields).find(([key]) => key.startsWith(`${path}.`))?.[1]
}

function Group({ title, intro, children }: { title: string; intro: string; children: ReactNode }) {
  return (
    <fieldset className="mt-8 border-t border-line pt-4">
      <legend className="float-left text-large font-[640]">{title}</legend>
      <p className="clear-left text-soft">{intro}</p>
      <div className="mt-3 grid gap-x-10 gap-y-4 sm:grid-cols-2 lg:grid-cols-3">{children}</div>
    </fieldset>
  )
}
