import type { FormField } from '@/components/ui/form-dialog'
import type { GatewayDto } from '@/lib/probes/schema'

/** A gateway's own fields, for registering and changing it. */
export function gatewayFields(gateway?: GatewayDto): FormField[] {
  return [
    { name: 'name', label: 'Name', kind: 'text', defaultValue: gateway?.name },
    {
      name: 'mayReplay',
      label: 'May send past instants',
      kind: 'checkbox',
      defaultValue: gateway?.mayReplay ?? false,
      hint: 'For imports and tests only. A gateway at a hearth must not.',
    },
  ]
}
