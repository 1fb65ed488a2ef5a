import { Constants, Formula, Limit, Part, Worked } from '@/components/numbers/part'
import { formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { deltaE2000 } from '@/lib/science/colour'
import {
  CARBON_MONOXIDE_LIMITS_PPM,
  nioshLimitsC,
  timeWeighted8hPpm,
  wbgtIndoorC,
} from '@/lib/science/exposure'
import { checkCharacter37_36 } from '@/lib/science/identifier'

export function Air({ unit }: { unit: TemperatureUnit }) {
  const shift = [
    { ppm: 60, hours: 2 },
    { ppm: 20, hours: 4 },
    { ppm: 5, hours: 2 },
  ]
  const limits = nioshLimitsC(300)
  return (
    <Part id="people" title="Air and heat: a record and a reminder">
      <p>
        Carbon monoxide is averaged over eight hours whatever the shift’s length. Heat is the wet bulb and the
        globe, weighed. Both are kept as records; neither is an alarm. The alarm you wear is the order to
        leave.
      </p>
      <Formula>{`8 h mean = sum of ppm × hours / 8
WBGT indoors = 0.7 wet bulb + 0.3 globe`}</Formula>
      <Worked>
        {shift.map((part) => `${part.ppm} ppm for ${part.hours} h`).join(', ')}:{' '}
        {formatNumber(timeWeighted8hPpm(shift), 1)} ppm. A wet bulb of {formatTemp(22, unit)} and a globe of{' '}
        {formatTemp(38, unit)}: WBGT {formatTemp(wbgtIndoorC(22, 38), unit, 1)}. At 300 W of work the alert
        limit is {formatTemp(limits.ral, unit, 1)} unacclimatised and {formatTemp(limits.rel, unit, 1)}{' '}
        acclimatised.
      </Worked>
      <Constants
        of="air"
        rows={[
          {
            name: 'Carbon monoxide, 8 h',
            value: `${CARBON_MONOXIDE_LIMITS_PPM.oshaPelTwa} ppm`,
            source: 'OSHA 29 CFR 1910.1000, Table Z-1',
          },
          {
            name: 'Carbon monoxide, 8 h',
            value: `${CARBON_MONOXIDE_LIMITS_PPM.nioshRelTwa} ppm`,
            source: 'NIOSH Pocket Guide',
          },
          {
            name: 'Ceiling',
            value: `${CARBON_MONOXIDE_LIMITS_PPM.nioshCeiling} ppm`,
            source: 'NIOSH Pocket Guide',
          },
        ].map((row, i) => ({ ...row, name: i === 1 ? `${row.name}, stricter` : row.name }))}
      />
      <Limit>
        Limits differ by country. Heat limits: NIOSH 2016-106, formula from memory. Follow local code and the
        responsible person.
      </Limit>
    </Part>
  )
}

export function Serials() {
  const payload = 'SML-0427'
  return (
    <Part id="serials" title="Serials and colour">
      <p>
        A barrel’s serial ends in a check character, so that one wrong character is always found and a swap of
        two neighbours nearly always. Hyphens do not count.
      </p>
      <Worked>
        {payload} has the check character {checkCharacter37_36(payload)} (ISO 7064, MOD 37,36). Two faces of
        L*a*b* 62, 9, 24 and 58, 10, 25 differ by {formatNumber(deltaE2000([62, 9, 24], [58, 10, 25]), 1)}.
      </Worked>
      <Limit>
        Colour difference: CIEDE2000 (CIE 142). A hand meter’s reading depends on its light and its aperture:
        compare within one meter.
      </Limit>
    </Part>
  )
}
