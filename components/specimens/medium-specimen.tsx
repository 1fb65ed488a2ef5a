import { Pair } from '@/components/chart/pair'
import { sampleCurve, sampleFinished, sampleMarks } from './sample-firing'

/** Medium pairs: one with many marks, an overlay of six with one chosen, and one in °F. */
export function MediumSpecimen() {
  const base = sampleFinished()
  const many = Array.from({ length: 24 }, (_, i) => ({
    timeS: 200 + i * 100,
    words: ['feed', 'stir', 'mist', 'lid off'][i % 4] ?? '',
  }))
  const others = ['SML-0419-K', 'SML-0421-T', 'SML-0423-B', 'SML-0425-T', 'SML-0426-W'].map((name, i) => ({
    ...sampleCurve(name, { seed: 20 + i, endS: 2600 + i * 60, offC: i * 2 - 4 }),
    isSelected: i === 2,
  }))
  return (
    <div className="grid grid-cols-2 gap-8">
      <Pair
        {...base}
        size="medium"
        dose={null}
        marks={sampleMarks}
        unit="F"
        limitC={215}
        planName="plan ±13°"
      />
      <Pair
        {...base}
        size="medium"
        dose={null}
        wood={null}
        second={null}
        marks={[]}
        lead={{ ...base.lead, name: 'SML-0427-P' }}
        others={others}
      />
      <div className="col-span-2">
        <Pair {...base} dose={null} marks={many} className="h-[460px]" />
      </div>
    </div>
  )
}
