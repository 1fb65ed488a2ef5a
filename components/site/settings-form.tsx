'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { TemperatureUnit } from '@/lib/format'
import { describeChanges } from '@/lib/audit/describe-changes'
import { callApi, isApiProblem } from '@/lib/http/api-client'
import type { SiteSettingsDto } from '@/lib/site/schema'
import { ruleGroups } from './rule-fields'
import { RoomSettingsFields } from './room-settings-fields'
import { RuleInput } from './rule-input'
import type { Bounds } from './rule-values'
import { readAt, writeAt } from './rule-values'

const labels: Record<string, string> = {
  name: 'Name',
  serialPrefix: 'Serial prefix',
  timeZone: 'Time zone',
  'room.words.colour': 'Words for colour',
  'room.words.smell': 'Words for smell',
  'room.conditions.nearestWithinH': 'A reading of the air belongs to a firing within',
  'room.exposure.carbonMonoxideLimits': 'Limits for carbon monoxide',
  'room.exposure.metabolicRateW': 'Metabolic rate of the work',
  'room.exposure.heatSource': 'Where the heat limits stand',
  'room.exposure.readingHoldsMin': 'A reading stands until the next, at most',
  ...Object.fromEntries(
    ruleGroups.flatMap((group) => group.fields.map((field) => [`rules.${field.path}`, field.label])),
  ),
}

export type SettingsFormProps = {
  settings: SiteSettingsDto
  bounds: Bounds
  timeZones: readonly string[]
  unit: TemperatureUnit
  isReadOnly: boolean
}

/** The site's name, time zone and rules. Saving puts a new version in force; scores keep the rules of their day. */
export function SettingsForm({ settings, bounds, timeZones, unit, isReadOnly }: SettingsFormProps) {
  const router = useRouter()
  const toast = useToast()
  const [draft, setDraft] = useState(settings)
  const [theirs, setTheirs] = useState<SiteSettingsDto | null>(null)
  const { isBusy, problem, send } = useRequest()
  const change = (part: Partial<SiteSettingsDto>) => setDraft((before) => ({ ...before, ...part }))

  async function save(event: FormEvent) {
    event.preventDefault()
    const { name, serialPrefix, timeZone, rules, room } = draft
    const body = { version: (theirs ?? settings).version, name, serialPrefix, timeZone, rules, room }
    const isSaved = await send(async () => {
      try {
        const saved = await callApi<SiteSettingsDto>('PUT', '/api/site-settings', { body })
        toast({ words: `Saved. Version ${saved.version} is in force.` })
      } catch (error) {
        if (isApiProblem(error) && error.problem.status === 409) setTheirs(await readSettings())
        throw error
      }
    })
    if (isSaved) router.refresh()
  }

  return (
    <form method="post" onSubmit={save} noValidate className="max-w-[64rem]">
      <FormError problem={problem} labels={labels} />
      {theirs === null ? null : <BothSides theirs={theirs} mine={draft} />}
      <SiteFields
        draft={draft}
        onChange={change}
        timeZones={timeZones}
        fields={problem?.fields}
        isReadOnly={isReadOnly}
      />
      {ruleGroups.map((group) => (
        <fieldset key={group.title} className="mt-8 border-t border-line pt-4">
          <legend className="float-left text-large font-[640]">{group.title}</legend>
          <p className="clear-left text-soft">{group.intro}</p>
          <div className="mt-3 grid gap-x-10 gap-y-4 sm:grid-cols-2 lg:grid-cols-3">
            {group.fields.map((field) => (
              <RuleInput
                key={field.path}
                field={field}
                value={readAt(draft.rules, field.path)}
                onValue={(value) =>
                  setDraft((before) => ({ ...before, rules: writeAt(before.rules, field.path, value) }))
                }
                bounds={bounds[field.path] ?? {}}
                error={problem?.fields?.[`rules.${field.path}`]}
                unit={unit}
                isReadOnly={isReadOnly}
              />
            ))}
          </div>
        </fieldset>
      ))}
      <RoomSettingsFields
        room={draft.room}
        onChange={(room) => change({ room })}
        fields={problem?.fields ?? {}}
        isReadOnly={isReadOnly}
      />
      {isReadOnly ? null : (
        <div className="mt-8 flex flex-wrap items-center gap-4">
          <Button type="submit" kind="main" isBusy={isBusy}>
            {isBusy ? 'Saving' : 'Save as a new version'}
          </Button>
          <p className="text-soft">Finished firings keep the scores and rules that they have.</p>
        </div>
      )}
    </form>
  )
}

function said(value: unknown): string {
  return typeof value === 'object' && value !== null ? JSON.stringify(value) : String(value)
}

function readSettings(): Promise<SiteSettingsDto> {
  return callApi<SiteSettingsDto>('GET', '/api/site-settings')
}

/** After a stale edit: where the version in force differs from what is typed here. */
function BothSides({ theirs, mine }: { theirs: SiteSettingsDto; mine: SiteSettingsDto }) {
  const pick = ({ name, serialPrefix, timeZone, rules, room }: SiteSettingsDto) => ({
    name,
    serialPrefix,
    timeZone,
    rules,
    room,
  })
  const changes = Object.entries(describeChanges(pick(theirs), pick(mine)))
  return (
    <Notice tone="attention" className="mb-4">
      <p>
        Version {theirs.version} by {theirs.changedBy ?? 'the set-up'} is in force. Saving again puts yours
        over it. It differs from what stands below in:
      </p>
      <ul className="mt-1">
        {changes.map(([path, { from, to }]) => (
          <li key={path}>
            {labels[path] ?? path}: {said(from)} there, {said(to)} here
          </li>
        ))}
      </ul>
    </Notice>
  )
}

function SiteFields({
  draft,
  onChange,
  timeZones,
  fields,
  isReadOnly,
}: {
  draft: SiteSettingsDto
  onChange: (part: Partial<SiteSettingsDto>) => void
  timeZones: readonly string[]
  fields: Readonly<Record<string, string>> | undefined
  isReadOnly: boolean
}) {
  return (
    <div className="grid gap-x-10 gap-y-4 sm:grid-cols-2 lg:grid-cols-3">
      <TextField
        name="name"
        label="Name of the cooperage"
        readOnly={isReadOnly}
        value={draft.name}
        onChange={(event) => onChange({ name: event.target.value })}
        error={fields?.name}
      />
      <TextField
        name="serialPrefix"
        label="Serial prefix"
        hint="2 to 5 capital letters; pieces made before keep theirs."
        readOnly={isReadOnly}
        value={draft.serialPrefix}
        onChange={(event) => onChange({ serialPrefix: event.target.value.toUpperCase() })}
        error={fields?.serialPrefix}
      />
      <SelectField
        name="timeZone"
        label="Time zone"
        hint="Instants are stored in UTC and shown in it."
        disabled={isReadOnly}
        options={timeZones.map((zone) => ({ value: zone, label: zone.replaceAll('_', ' ') }))}
        value={draft.timeZone}
        onChange={(event) => onChange({ timeZone: event.target.value })}
        error={fields?.timeZone}
      />
    </div>
  )
}
