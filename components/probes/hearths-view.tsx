import { HearthTable, NewHearth } from '@/components/probes/hearth-table'
import { RoomTabs } from '@/components/probes/room-tabs'
import { PageHead } from '@/components/ui/page-head'
import type { HearthDto } from '@/lib/probes/schema'

/** The firing stations with what stands there now and what usually reads them. */
export function HearthsView({ hearths, mayWrite }: { hearths: readonly HearthDto[]; mayWrite: boolean }) {
  return (
    <>
      <PageHead
        title="Hearths"
        sub="The firing stations. A barrel starts on one that is in use and free."
        actions={mayWrite ? <NewHearth /> : undefined}
      />
      <RoomTabs current="hearths" />
      <HearthTable hearths={hearths} mayWrite={mayWrite} />
    </>
  )
}
