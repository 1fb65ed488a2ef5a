import { FormDialog } from '@/components/ui/form-dialog'
import type { FormField } from '@/components/ui/form-dialog'
import { probeHeights, probeMountings, thermocoupleTypes, usualRoles } from '@/lib/probes/schema'
import type { GatewayDto, HearthDto, ProbeDto } from '@/lib/probes/schema'

const optionsOf = (values: readonly string[]) => values.map((value) => ({ value, label: value }))

type Choices = { gateways: readonly GatewayDto[]; hearths: readonly HearthDto[] }

function probeFields({ gateways, hearths }: Choices, probe?: ProbeDto): FormField[] {
  return [
    { name: 'name', label: 'Name', kind: 'text', defaultValue: probe?.name },
    {
      name: 'gatewayId',
      label: 'Gateway',
      kind: 'select',
      options: gateways.map((gateway) => ({ value: gateway.id, label: gateway.name })),
      defaultValue: probe?.gateway.id,
    },
    { name: 'channel', label: 'Channel', kind: 'number', defaultValue: probe?.channel },
    {
      name: 'thermocoupleType',
      label: 'Thermocouple type',
      kind: 'select',
      options: optionsOf(thermocoupleTypes),
      defaultValue: probe?.thermocoupleType ?? 'K',
    },
    {
      name: 'iecClass',
      label: 'IEC class',
      kind: 'number',
      defaultValue: probe?.iecClass ?? 1,
      hint: '1, 2 or 3.',
    },
    { name: 'serial', label: 'Its serial', kind: 'text', defaultValue: probe?.serial },
    {
      name: 'hearthId',
      label: 'Usual hearth',
      kind: 'select',
      options: hearths.map((hearth) => ({ value: hearth.id, label: `Hearth ${hearth.number}` })),
      defaultValue: probe?.hearth?.id,
      hint: 'None for a spare.',
    },
    {
      name: 'usualRole',
      label: 'Usual role',
      kind: 'select',
      options: optionsOf(usualRoles),
      defaultValue: probe?.usualRole,
    },
    {
      name: 'height',
      label: 'Height',
      kind: 'select',
      options: optionsOf(probeHeights),
      defaultValue: probe?.place.height ?? 'bilge',
    },
    { name: 'side', label: 'Side', kind: 'text', defaultValue: probe?.place.side },
    {
      name: 'depthMm',
      label: 'Depth from the face',
      kind: 'number',
      unit: 'mm',
      defaultValue: probe?.place.depthMm,
    },
    {
      name: 'mounting',
      label: 'Mounting',
      kind: 'select',
      options: optionsOf(probeMountings),
      defaultValue: probe?.place.mounting ?? 'wedge',
    },
  ]
}

export function NewProbe({ choices }: { choices: Choices }) {
  return (
    <FormDialog
      openLabel="Add a probe"
      title="Add a probe"
      submitLabel="Add"
      method="POST"
      path="/api/probes"
      fields={probeFields(choices)}
      doneHref="/probes/{id}"
    >
      <p>A reading belongs to its place: half a millimetre of depth is about 5 °C late in a toast.</p>
    </FormDialog>
  )
}

export function ChangeProbe({
  probe,
  choices,
  kind = 'quiet',
}: {
  probe: ProbeDto
  choices: Choices
  kind?: 'quiet' | 'plain'
}) {
  return (
    <FormDialog
      openLabel="Change"
      openKind={kind}
      openFor={probe.name}
      title={`Change ${probe.name}`}
      submitLabel="Save"
      method="PUT"
      path={`/api/probes/${probe.id}`}
      fields={probeFields(choices, probe)}
    >
      <p>Past firings keep the place that the probe had then, and its history says who moved it when.</p>
    </FormDialog>
  )
}
