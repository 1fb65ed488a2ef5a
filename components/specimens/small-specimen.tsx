import { Pair } from '@/components/chart/pair'
import { sampleCurve, sampleFinished, sampleLive } from './sample-firing'

const hearths = [
  { hearth: 1, nowS: 2370, seed: 4, figure: '193', words: '3 above plan', isWrong: false },
  { hearth: 2, nowS: 1600, seed: 7, figure: '191', words: '3 above plan', isWrong: false },
  { hearth: 3, nowS: 930, seed: 11, figure: '142', words: '25 below plan', isWrong: true },
]

/** The room's rows and the batch's columns. */
export function SmallSpecimen() {
  const base = sampleFinished()
  return (
    <>
      <div data-ground="fireside" className="mb-6 w-[1280px]">
        {hearths.map(({ hearth, nowS, seed, figure, words, isWrong }) => (
          <div
            key={hearth}
            className={`grid grid-cols-[176px_392px_1fr] items-center gap-6 border-b border-line px-6 py-4 ${isWrong ? 'border-l-8 border-l-amber' : ''}`}
          >
            <div>
              <p className="text-[62px] leading-none font-[640]">{hearth}</p>
              <p className="text-[20px] text-soft">SML-0425-T</p>
            </div>
            <Pair
              {...sampleLive(nowS, { seed, offC: isWrong ? -22 : 0 })}
              size="small"
              second={null}
              widthPx={392}
              heightPx={150}
            />
            <div className={isWrong ? 'text-amber' : ''}>
              <p className="text-[72px] leading-none font-[640]">{figure}</p>
              <p className="text-[20px]">{words}</p>
            </div>
          </div>
        ))}
      </div>
      <div className="grid grid-cols-[repeat(14,minmax(0,1fr))] gap-3">
        {Array.from({ length: 14 }, (_, i) => {
          const lead = sampleCurve('bilge A', { seed: i + 1, offC: ((i * 7) % 5) - 2 })
          return (
            <Pair
              key={i}
              {...base}
              size="small"
              lead={lead}
              second={null}
              widthPx={84}
              heightPx={260}
              woodShare={0.46}
              title={`Barrel ${i + 1} (invented)`}
            />
          )
        })}
      </div>
      <div className="mt-6 max-w-80">
        <p className="mb-1 text-soft">With no reading yet</p>
        <Pair
          {...sampleLive(60)}
          size="small"
          lead={{ name: 'bilge A', timeS: [], tempC: [] }}
          second={null}
          wood={null}
          nowS={null}
        />
      </div>
    </>
  )
}
