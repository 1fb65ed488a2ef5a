import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { TabLinks } from '@/components/ui/tab-links'
import type { MarkerDesk } from '@/lib/markers/get-marker-desk'
import { responseName, restsOn } from '@/lib/markers/response-words'
import type { MarkerPageView, MarkerResponseDto } from '@/lib/markers/schema'
import { FitPanel } from './fit-panel'
import { FormulaEditor } from './formula-editor'
import { ResponseHistory } from './response-history'
import { ResponseView } from './response-view'

export type MarkerViewProps = {
  desk: MarkerDesk
  view: MarkerPageView
  /** The response that is looked at; undefined for the one in force. */
  number: number | undefined
  /** The response that an editor begins from; undefined for the one in force. */
  from: number | undefined
}

/** The page of one marker: its response, the two ways of making one, and every earlier one. */
export function MarkerView({ desk, view, number, from }: MarkerViewProps) {
  const { marker, canWrite } = desk
  const shown = canWrite || view === 'earlier' ? view : 'response'
  const href = (to: MarkerPageView) =>
    to === 'response' ? `/markers/${marker.id}` : `/markers/${marker.id}?view=${to}`
  const link = (to: MarkerPageView, label: string, count?: number) => ({
    href: href(to),
    label,
    isCurrent: shown === to,
    ...(count === undefined ? {} : { count }),
  })
  const start = marker.responses.find((response) => response.number === from) ?? marker.response
  return (
    <>
      <PageHead
        title={marker.name}
        aside={marker.response?.unit ?? marker.unit}
        sub={<Summary desk={desk} />}
      />
      <TabLinks
        label="Parts of this page"
        links={[
          link('response', 'Response'),
          ...(canWrite ? [link('formula', 'Write a formula'), link('fit', 'Fit results')] : []),
          link('earlier', 'All responses', marker.responses.length),
        ]}
      />
      <div className="mt-5">
        {shown === 'response' ? <Response desk={desk} number={number} /> : null}
        {shown === 'formula' ? <FormulaPart desk={desk} start={start} /> : null}
        {shown === 'fit' ? <FitPart desk={desk} start={start} /> : null}
        {shown === 'earlier' ? (
          <ResponseHistory marker={marker} zone={desk.timeZone} canWrite={canWrite} />
        ) : null}
      </div>
    </>
  )
}

function Summary({ desk: { marker } }: { desk: MarkerDesk }) {
  if (marker.response === null) return 'No response yet: the bench predicts nothing of it.'
  const { number, kind } = marker.response
  if (kind === 'formula') return `Response ${number} is a formula: no data behind it, and so no interval.`
  return `Response ${number}. ${responseName(marker.response)}. It rests on ${restsOn(marker.response)}.`
}

function Response({ desk, number }: { desk: MarkerDesk; number: number | undefined }) {
  const { marker, canWrite, timeZone } = desk
  const response = marker.responses.find((one) => one.number === number) ?? marker.response
  if (response === null) {
    return (
      <EmptyState
        title="This marker has no response yet."
        action={
          canWrite ? (
            <>
              <LinkButton kind="main" href={`/markers/${marker.id}?view=fit`}>
                Fit results
              </LinkButton>
              <LinkButton href={`/markers/${marker.id}?view=formula`}>Write a formula</LinkButton>
            </>
          ) : undefined
        }
      >
        {canWrite
          ? 'Fit one from laboratory results of fired barrels: its predictions come with an interval. Or write a formula from experience: its predictions come without.'
          : 'A chemist or a master cooper fits one from laboratory results, or writes a formula.'}
      </EmptyState>
    )
  }
  return (
    <>
      {response.id === marker.response?.id ? null : (
        <Notice className="mb-4">
          This is response {response.number}, which was followed by others. The bench predicts from response{' '}
          {marker.response?.number}.
        </Notice>
      )}
      <ResponseView response={response} name={marker.name} zone={timeZone} />
    </>
  )
}

type Start = { desk: MarkerDesk; start: MarkerResponseDto | null }

function FormulaPart({ desk: { marker, symbols, functions }, start }: Start) {
  return (
    <FormulaEditor
      key={start?.number ?? 0}
      markerId={marker.id}
      unit={start?.unit ?? marker.unit}
      formula={start?.kind === 'formula' ? start.formula : ''}
      inForce={marker.response}
      symbols={symbols}
      functions={functions}
    />
  )
}

function FitPart({ desk: { marker, usualPlace }, start }: Start) {
  return (
    <FitPanel
      key={start?.number ?? 0}
      marker={{ id: marker.id, name: marker.name, unit: marker.unit }}
      seenNumber={marker.response?.number ?? 0}
      start={start?.kind === 'fit' ? start : null}
      usualPlace={usualPlace}
    />
  )
}
