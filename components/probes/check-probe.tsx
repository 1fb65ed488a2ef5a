import { FormDialog } from '@/components/ui/form-dialog'
import type { TemperatureUnit } from '@/lib/format'
import { formatTemp } from '@/lib/format'
import type { ProbeDto } from '@/lib/probes/schema'

/** Records a check of one probe; readings are corrected by it from then on. */
export function CheckProbe({ probe, unit }: { probe: ProbeDto; unit: TemperatureUnit }) {
  return (
    <FormDialog
      openLabel="Check"
      openKind="quiet"
      openFor={probe.name}
      title={`Check ${probe.name}`}
      submitLabel="Record the check"
      method="POST"
      path={`/api/probes/${probe.id}/checks`}
      personUnit={unit}
      fields={[
        {
          name: 'kind',
          label: 'Against',
          kind: 'select',
          options: [
            { value: 'ice', label: `Melting ice, ${formatTemp(0, unit)}` },
            { value: 'boiling', label: 'Boiling water, at the day’s pressure' },
            { value: 'block', label: 'A dry block or reference thermometer' },
          ],
        },
        {
          name: 'referenceTempC',
          label: 'The reference stood at',
          kind: 'temperature',
          isLeftOutWhenEmpty: true,
          hint: `For a block only. For a lead probe at ${formatTemp(180, unit)} to ${formatTemp(230, unit)}, where the dose is made.`,
        },
        { name: 'measuredTempC', label: 'The probe read', kind: 'temperature' },
        {
          name: 'uncertaintyC',
          label: 'Uncertainty of the check (k = 2)',
          kind: 'difference',
          hint: 'Half-width of reading and repeatability; for a block its own uncertainty too. Ice and boiling water have theirs added.',
        },
        {
          name: 'stationPressureHpa',
          label: 'Station pressure',
          kind: 'number',
          unit: 'hPa',
          isLeftOutWhenEmpty: true,
          hint: 'For boiling water: the pressure here, not the one reduced to sea level.',
        },
        {
          name: 'checkedAt',
          label: 'Checked on',
          kind: 'date',
          isLeftOutWhenEmpty: true,
          hint: 'Left empty: now.',
        },
        { name: 'dueAt', label: 'Due again on', kind: 'date' },
      ]}
    />
  )
}
