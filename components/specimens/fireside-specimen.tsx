import { Pair } from '@/components/chart/pair'
import { TopLine } from '@/components/live/fireside-top-line'
import { Button } from '@/components/ui/button'
import { StaveGauge } from '@/components/ui/stave-gauge'
import { LiveSpecimen } from './live-specimen'
import { sampleLive } from './sample-firing'

const NOW_S = 1600

/** The fireside's measure, 1280 × 800: the big figures beside the live pair. */
export function FiresideSpecimen({ isAlarm }: { isAlarm: boolean }) {
  const lead = isAlarm ? { gap: { fromS: NOW_S - 42, toS: NOW_S + 1 } } : {}
  const props = sampleLive(NOW_S, lead)
  return (
    <div
      data-ground="fireside"
      className="flex h-[800px] w-[1280px] flex-col overflow-hidden"
      id={isAlarm ? 'alarm' : 'fireside'}
    >
      {isAlarm ? (
        <TopLine
          headline="Bilge A has no reading."
          instruction="Look at the barrel, then its lead."
          age="0:42"
          level="amber"
          isSeen={false}
          moreCount={1}
        />
      ) : null}
      <div className="grid min-h-0 flex-1 grid-cols-[396px_1fr]">
        <Hands />
        <div className="grid min-h-0 grid-rows-[auto_1fr]">
          <Figures isAlarm={isAlarm} />
          <div className="relative min-h-0 border-t border-line pt-3 pr-3 pl-2 pb-2">
            {isAlarm ? (
              <Pair {...props} future={null} className="h-full" />
            ) : (
              <LiveSpecimen props={props} fromS={NOW_S} />
            )}
          </div>
        </div>
      </div>
    </div>
  )
}

function Hands() {
  return (
    <div className="flex flex-col border-r border-line">
      <div className="flex items-center gap-6 border-b border-line px-6 py-2">
        <p className="text-[120px] leading-[0.92] font-[640]">2</p>
        <div className="text-[21px] leading-[1.3]">
          <p className="font-[640]">SML-0427-P</p>
          <p className="text-soft">Quay medium, version 4</p>
          <p className="text-soft">Batch 118, 6 of 14</p>
        </div>
      </div>
      <div className="px-6 py-3">
        <p className="text-[22px] text-soft">Hold, time left</p>
        <p className="text-[120px] leading-[0.92] font-[640]">11:20</p>
        <p className="mt-1 text-[62px] leading-[1.1] font-[640]">then lid on</p>
        <Button kind="main" className="mt-3 w-full flex-col gap-0!">
          <span>End hold</span>
          <span className="text-[18px] font-normal text-soft">press for a second</span>
        </Button>
      </div>
    </div>
  )
}

function Figures({ isAlarm }: { isAlarm: boolean }) {
  return (
    <div className="grid grid-cols-[404px_1fr]">
      <div className="border-r border-line px-6 py-3">
        <p className="flex justify-between text-[22px] text-soft">
          <span>Wood at 2 mm, °C</span>
          <span>opposite 188</span>
        </p>
        {isAlarm ? (
          <p className="mt-2 text-[60px] leading-none font-[640] text-amber">
            NO
            <br />
            READING
          </p>
        ) : (
          <div className="flex items-end justify-between">
            <p className="text-[120px] leading-none font-[640]">191</p>
            <p className="pb-3 text-right text-[24px] leading-tight">
              <span className="block font-[640] whitespace-nowrap">3 above plan</span>+0.8°/min
            </p>
          </div>
        )}
      </div>
      <div className="px-6 py-3 text-[22px]">
        <p className="flex justify-between text-soft">
          <span>Dose, good to ±11 %</span>
          <span>{isAlarm ? '14:27' : 'live 14:27'}</span>
        </p>
        <div className="flex items-center justify-between gap-3">
          <p className="text-[62px] leading-[1.2] font-[640] whitespace-nowrap">36&nbsp;%</p>
          <p className="whitespace-nowrap text-soft">plan 31 %</p>
          <StaveGauge
            fraction={0.36}
            range={{ low: 0.32, high: 0.4 }}
            planFraction={0.31}
            toleranceLog10={0.12}
          />
        </div>
        <p className="text-[20px]">On target in 15 to 18 min, no extra time.</p>
        <p className="text-[20px] text-soft">Last 30: within 1.5 min, 24 times.</p>
      </div>
    </div>
  )
}
