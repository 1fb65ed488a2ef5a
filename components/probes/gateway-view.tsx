import { gatewayFields } from '@/components/probes/gateway-fields'
import { GatewayFacts } from '@/components/probes/gateway-facts'
import { GatewayProbes, LossTable, RefusedTable, StartTable } from '@/components/probes/gateway-lists'
import { GatewayState } from '@/components/probes/gateway-state'
import { GatewayTokens } from '@/components/probes/gateway-tokens'
import { RetireButton } from '@/components/probes/retire-button'
import { RoomTabs } from '@/components/probes/room-tabs'
import { FormDialog } from '@/components/ui/form-dialog'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { changeQuery } from '@/components/ui/url-query'
import type { GatewayPage } from '@/lib/probes/get-gateway-page'

/** One gateway: how it stands and what to do, its probes, tokens and starts, what was refused and what was lost. */
export function GatewayView({
  page,
  values,
}: {
  page: GatewayPage
  values: Readonly<Record<string, string>>
}) {
  const { gateway, tokens, refused, losses, timeZone, nowMs } = page
  const href = `/probes/gateways/${gateway.id}`
  const isRetired = gateway.retiredAt !== null
  return (
    <>
      <PageHead
        title={gateway.name}
        aside={isRetired ? 'retired gateway' : 'gateway'}
        sub={<GatewayState gateway={gateway} nowMs={nowMs} />}
        actions={tokens === null || isRetired ? undefined : <Actions page={page} />}
      />
      <RoomTabs current="gateways" />
      <div className="space-y-8">
        <div className="grid gap-x-12 gap-y-8 lg:grid-cols-2">
          <section>
            <h2 className="mb-1">What it says of itself</h2>
            <GatewayFacts gateway={gateway} zone={timeZone} nowMs={nowMs} />
          </section>
          <section>
            <h2 className="mb-2">Probes on it</h2>
            <GatewayProbes probes={gateway.probes} />
          </section>
        </div>
        {tokens === null ? null : (
          <GatewayTokens
            gateway={{ id: gateway.id, name: gateway.name, isRetired }}
            tokens={tokens}
            zone={timeZone}
          />
        )}
        <section>
          <h2 className="mb-2">Starts of its program</h2>
          <StartTable boots={gateway.boots} zone={timeZone} />
        </section>
        <section id="refused">
          <h2 className="mb-2">Refused readings</h2>
          <RefusedTable
            refused={refused.items}
            reasons={gateway.refusedReasons}
            chosen={values['reason']}
            href={(reason) => changeQuery(href, values, { reason, refused: null })}
            zone={timeZone}
          />
          <Pager
            firstHref={
              values['refused'] === undefined ? undefined : changeQuery(href, values, { refused: null })
            }
            nextHref={
              refused.nextCursor === null
                ? undefined
                : changeQuery(href, values, { refused: refused.nextCursor })
            }
          />
        </section>
        <section id="lost">
          <h2 className="mb-2">Declared lost</h2>
          <LossTable losses={losses.items} zone={timeZone} />
          <Pager
            firstHref={values['lost'] === undefined ? undefined : changeQuery(href, values, { lost: null })}
            nextHref={
              losses.nextCursor === null ? undefined : changeQuery(href, values, { lost: losses.nextCursor })
            }
          />
        </section>
      </div>
    </>
  )
}

function Actions({ page: { gateway } }: { page: GatewayPage }) {
  return (
    <>
      <FormDialog
        openLabel="Change"
        title={`Change ${gateway.name}`}
        submitLabel="Save"
        method="PUT"
        path={`/api/gateways/${gateway.id}`}
        fields={gatewayFields(gateway)}
      />
      <RetireButton name={gateway.name} path={`/api/gateways/${gateway.id}/retire`}>
        Its tokens end at once, and it never comes back: a new box is registered as a gateway of its own. Move
        or retire its probes first. What it sent stays.
      </RetireButton>
    </>
  )
}
