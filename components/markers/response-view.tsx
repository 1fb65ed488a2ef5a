import { Facts } from '@/components/ui/facts'
import { Time } from '@/components/ui/time'
import { formatNumber } from '@/lib/format'
import type { MarkerResponseDto } from '@/lib/markers/schema'
import { markerFamilies } from '@/lib/science/marker-families'
import { FitReport } from './fit-report'
import { ResultTable } from './result-table'

function mm(depthMm: number): string {
  return formatNumber(depthMm, depthMm % 1 === 0 ? 0 : 1)
}

/** A response with everything that it rests on. */
export function ResponseView({
  response,
  name,
  zone,
}: {
  response: MarkerResponseDto
  name: string
  zone: string
}) {
  const written = (
    <>
      {response.author}, <Time at={response.createdAt} zone={zone} />
    </>
  )
  const note = response.note === '' ? [] : [{ name: 'Note', value: response.note }]
  if (response.kind === 'formula') {
    return (
      <section aria-label="Response" className="max-w-[60rem] space-y-4">
        <p className="border-y border-line py-3 font-mono text-large break-words">{response.formula}</p>
        <Facts
          facts={[
            { name: 'Gives', value: response.unit },
            { name: 'Rests on', value: 'The author’s judgement. No data behind it, and so no interval.' },
            { name: 'Written by', value: written },
            ...note,
          ]}
        />
      </section>
    )
  }
  const { picture, place } = response
  return (
    <section aria-label="Response" className="space-y-6">
      <FitReport picture={picture} name={name} unit={response.unit} />
      <div className="grid gap-x-9 gap-y-4 lg:grid-cols-[8fr_5fr]">
        <ResultTable
          results={picture.results}
          residuals={picture.fit.residuals}
          residualSd={picture.fit.residualSd}
          keys={markerFamilies[picture.fit.family].predictors}
          unit={response.unit}
        />
        <div>
          <h2 className="mb-1">What was assayed</h2>
          <Facts
            facts={[
              { name: 'Matrix', value: response.matrix },
              { name: 'Extraction', value: response.extraction },
              { name: 'Sample', value: response.samplePosition },
              {
                name: 'Depth',
                value: `${mm(response.sampleFromMm)} to ${mm(response.sampleToMm)} mm from the face`,
              },
              {
                name: 'Doses read at',
                value: `${place.height} ${place.side}, ${mm(place.depthMm)} mm, ${place.mounting}`,
              },
              { name: 'Site rules', value: `version ${response.siteSettingsVersion}` },
              { name: 'Fitted by', value: written },
              ...note,
            ]}
          />
        </div>
      </div>
    </section>
  )
}
