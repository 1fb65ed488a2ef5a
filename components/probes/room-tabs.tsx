import { TabLinks } from '@/components/ui/tab-links'

export type RoomPlace = 'probes' | 'gateways' | 'hearths' | 'water' | 'repeatability'

const places: readonly { key: RoomPlace; href: string; label: string }[] = [
  { key: 'probes', href: '/probes', label: 'Probes' },
  { key: 'gateways', href: '/probes/gateways', label: 'Gateways' },
  { key: 'hearths', href: '/probes/hearths', label: 'Hearths' },
  { key: 'water', href: '/probes/water', label: 'Water' },
  { key: 'repeatability', href: '/probes/repeatability', label: 'What this room can judge' },
]

/** The room’s equipment, each kind with its own address. */
export function RoomTabs({ current }: { current: RoomPlace }) {
  return (
    <div className="mb-5">
      <TabLinks
        label="The room’s equipment"
        links={places.map(({ key, href, label }) => ({ href, label, isCurrent: key === current }))}
      />
    </div>
  )
}
