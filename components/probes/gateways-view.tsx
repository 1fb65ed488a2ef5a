import { gatewayFields } from '@/components/probes/gateway-fields'
import { GatewayTable } from '@/components/probes/gateway-table'
import { RoomTabs } from '@/components/probes/room-tabs'
import { FormDialog } from '@/components/ui/form-dialog'
import { PageHead } from '@/components/ui/page-head'
import type { GatewayDto } from '@/lib/probes/schema'

/** All gateways, and the way to register one. */
export function GatewaysView({
  gateways,
  nowMs,
  mayWrite,
}: {
  gateways: readonly GatewayDto[]
  nowMs: number
  mayWrite: boolean
}) {
  return (
    <>
      <PageHead
        title="Gateways"
        sub="The boxes that read the probes. Each keeps its readings on its own disk until they are stored here."
        actions={mayWrite ? <NewGateway /> : undefined}
      />
      <RoomTabs current="gateways" />
      <GatewayTable gateways={gateways} nowMs={nowMs} mayWrite={mayWrite} />
    </>
  )
}

function NewGateway() {
  return (
    <FormDialog
      openLabel="Register a gateway"
      title="Register a gateway"
      submitLabel="Register"
      method="POST"
      path="/api/gateways"
      fields={gatewayFields()}
      doneHref="/probes/gateways/{id}"
    >
      <p>On its page you make the code by which its program enrols; without that it cannot send.</p>
    </FormDialog>
  )
}
