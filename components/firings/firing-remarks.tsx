import { Facts } from '@/components/ui/facts'
import type { FiringDto } from '@/lib/firings/schema'
import { formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { CONDUCTIVITY_MOISTURE_LIMIT_PERCENT, isConductivityOutsideFormula } from '@/lib/science/wood'

/** Wood too wet for the handbook's formula makes the stave model less sure; it says so where the moisture stands. */
function wetWords(moisturePercent: number): string {
  if (!isConductivityOutsideFormula(moisturePercent)) return ''
  return `. From ${CONDUCTIVITY_MOISTURE_LIMIT_PERCENT} % on the wood’s conductivity is outside its formula: the stave model is less sure.`
}

/** What the toaster said and measured by hand; kept beside the score, never inside it. */
export function FiringRemarks({ firing, unit }: { firing: FiringDto; unit: TemperatureUnit }) {
  const facts = [
    firing.moisturePercent === null
      ? null
      : {
          name: 'Stave moisture',
          value: `${formatNumber(firing.moisturePercent, 1)} %, ${firing.moistureMethod ?? 'method not given'}${wetWords(firing.moisturePercent)}`,
        },
    firing.colour === null ? null : { name: 'Colour', value: firing.colour },
    firing.smell === null ? null : { name: 'Smell', value: firing.smell },
    firing.outsideTempC === null
      ? null
      : { name: 'Outside, by hand meter', value: formatTemp(firing.outsideTempC, unit) },
    firing.remarks === '' ? null : { name: 'Remarks', value: firing.remarks },
  ].filter((fact) => fact !== null)
  return (
    <section>
      <h2 className="mb-1">By hand</h2>
      {facts.length === 0 ? (
        <p className="border-y border-line py-2 text-soft">
          Neither colour, smell, outside temperature nor remarks were noted.
        </p>
      ) : (
        <Facts isRuled facts={facts} />
      )}
    </section>
  )
}
