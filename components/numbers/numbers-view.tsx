import { Comparing, Groups, Charts } from '@/components/numbers/compare-parts'
import { Dose, Indices, Intervals } from '@/components/numbers/dose-parts'
import { Air, Serials } from '@/components/numbers/people-parts'
import { Climb, Forecast, Plan } from '@/components/numbers/plan-parts'
import { Gaps, Ruleset, Verdicts } from '@/components/numbers/score-parts'
import { Moisture, Stave } from '@/components/numbers/stave-parts'
import { ProbeChecks, Thermocouples } from '@/components/numbers/temperature-parts'
import { PageHead } from '@/components/ui/page-head'
import type { TemperatureUnit } from '@/lib/format'
import { ruleset1 } from '@/lib/science/score-ruleset'
import type { SiteRules } from '@/lib/science/site-rules'

const contents = [
  ['temperature', 'Temperature from a probe'],
  ['checks', 'Probe checks'],
  ['climb', 'Climb rate'],
  ['dose', 'Heat dose'],
  ['intervals', 'How sure a dose is'],
  ['indices', 'Slow and fast index'],
  ['plan', 'Plan, band, solving'],
  ['forecast', 'Forecast and advice'],
  ['score', 'Score'],
  ['verdict', 'Verdict'],
  ['gaps', 'Gaps'],
  ['stave', 'Inside the stave'],
  ['moisture', 'Stave moisture'],
  ['comparing', 'Comparing curves'],
  ['charts', 'Charts and capability'],
  ['groups', 'Groups of firings'],
  ['people', 'Air and heat'],
  ['serials', 'Serials and colour'],
] as const

/** Every number of the app: formula, constants and sources, limits, and an example worked by the app’s own functions. */
export function NumbersView({
  rules,
  unit,
  siteVersion,
}: {
  rules: SiteRules
  unit: TemperatureUnit
  siteVersion: number
}) {
  return (
    <>
      <PageHead
        title="How the numbers are made"
        sub={`Ruleset ${ruleset1.number}, with the constants of this site’s settings, version ${siteVersion}. A score names both and keeps them: later settings never change it. The examples are worked afresh by the functions that the app itself uses.`}
      />
      <div className="grid gap-x-12 lg:grid-cols-[13rem_minmax(0,1fr)]">
        <nav aria-label="Numbers" className="mb-6 no-print lg:sticky lg:top-6 lg:self-start">
          <ul className="columns-2 lg:columns-1">
            {contents.map(([id, name]) => (
              <li key={id}>
                <a href={`#${id}`} className="block py-1 hover:underline underline-offset-3">
                  {name}
                </a>
              </li>
            ))}
          </ul>
        </nav>
        <div className="space-y-8">
          <Thermocouples unit={unit} />
          <ProbeChecks unit={unit} />
          <Climb rules={rules} unit={unit} />
          <Dose rules={rules} unit={unit} />
          <Intervals rules={rules} unit={unit} />
          <Indices rules={rules} unit={unit} />
          <Plan rules={rules} unit={unit} />
          <Forecast rules={rules} unit={unit} />
          <Ruleset unit={unit} />
          <Verdicts rules={rules} />
          <Gaps rules={rules} />
          <Stave rules={rules} unit={unit} />
          <Moisture unit={unit} />
          <Comparing unit={unit} />
          <Charts />
          <Groups />
          <Air unit={unit} />
          <Serials />
        </div>
      </div>
    </>
  )
}
