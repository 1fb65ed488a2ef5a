import Link from 'next/link'
import { Facts } from '@/components/ui/facts'
import type { AirReadingDto, FiringAir } from '@/lib/conditions/schema'
import type { FiringPicture } from '@/lib/firings/picture-types'
import { formatInstant, formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** The air that stood around a firing: of room and yard the reading nearest to its toast start. */
export function FiringAirFacts({
  picture: { firing, timeZone: zone },
  air,
  unit,
}: {
  picture: FiringPicture
  /** Null before the firing has begun. */
  air: FiringAir | null
  unit: TemperatureUnit
}) {
  if (air === null) return null
  return (
    <section>
      <h2 className="mb-1">Conditions</h2>
      <Facts
        isRuled
        facts={[
          { name: 'Room', value: airWords(air.room, zone, unit) },
          { name: 'Yard', value: airWords(air.yard, zone, unit) },
          { name: 'First of the day', value: firing.isFirstOfDay ? 'yes' : 'no' },
          {
            name: 'That day',
            value: (
              <Link href={`/conditions?day=${air.day}`} className="link">
                Conditions of the day
              </Link>
            ),
          },
        ]}
      />
    </section>
  )
}

function airWords(reading: AirReadingDto | null, zone: string, unit: TemperatureUnit): string {
  if (reading === null) return 'no reading near enough'
  const wood =
    reading.equilibriumMoisturePercent === null
      ? ''
      : `, in which wood comes to ${formatNumber(reading.equilibriumMoisturePercent, 1)}\u00a0%`
  return `${formatTemp(reading.tempC, unit, 1)}, ${formatNumber(reading.humidityPercent)}\u00a0% humidity at ${formatInstant(reading.at, zone, 'time')}${wood}`
}
