import type { DeviceKind } from '@/lib/auth/actor'
import type { DeviceDto } from '@/lib/devices/schema'
import type { FormField } from '@/components/ui/form-dialog'
import type { SelectOption } from '@/components/ui/select-field'

const kindWords: Record<DeviceKind, string> = {
  hearth: 'tablet at a hearth',
  room: 'tablet of the whole room',
  'wall screen': 'wall screen',
}

/** "hearth 2", "the whole room", "wall screen" */
export function placeWords({ kind, hearth }: Pick<DeviceDto, 'kind' | 'hearth'>): string {
  if (kind === 'hearth') return `hearth ${hearth?.number ?? '–'}`
  return kind === 'room' ? 'the whole room' : 'wall screen'
}

export const deviceFilters = [
  {
    name: 'state',
    label: 'State',
    options: [
      { value: 'in use', label: 'In use' },
      { value: 'waiting', label: 'Waiting for its code' },
      { value: 'revoked', label: 'Revoked' },
      { value: 'all', label: 'All' },
    ],
    fallback: 'in use',
  },
]

/** The fields of a device, as it is or as a new one begins. */
export function deviceFields(hearths: readonly SelectOption[], device?: DeviceDto): FormField[] {
  return [
    {
      name: 'name',
      label: 'Name',
      kind: 'text',
      defaultValue: device?.name,
      hint: 'Such as Tablet hearth 2.',
    },
    {
      name: 'kind',
      label: 'What it is',
      kind: 'select',
      options: Object.entries(kindWords).map(([value, words]) => ({
        value,
        label: `${words.charAt(0).toUpperCase()}${words.slice(1)}`,
      })),
      defaultValue: device?.kind ?? 'hearth',
      hint: 'A wall screen is looked at: nobody signs in at it.',
    },
    {
      name: 'hearthId',
      label: 'Hearth',
      kind: 'select',
      options: hearths,
      defaultValue: device?.hearth?.id ?? '',
      hint: 'For a tablet at a hearth. It opens there; it can mark at every hearth.',
    },
    {
      name: 'temperatureUnit',
      label: 'Shows, with nobody signed in',
      kind: 'select',
      options: [
        { value: 'C', label: '°C' },
        { value: 'F', label: '°F' },
      ],
      defaultValue: device?.temperatureUnit ?? 'C',
    },
    {
      name: 'idleMinutes',
      label: 'Signs out without a touch after',
      kind: 'number',
      unit: 'min',
      defaultValue: device?.idleMinutes ?? 10,
    },
  ]
}
