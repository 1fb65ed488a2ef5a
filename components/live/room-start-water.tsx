import { Button } from '@/components/ui/button'
import { classNames } from '@/components/ui/class-names'
import type { WaterCheckDto } from '@/lib/probes/schema'
import { firesideType } from './fireside-type'

/** Which water is used, where there is more than one source; a touch each. */
export function RoomStartWater({
  waters,
  chosen,
  onChoose,
}: {
  waters: readonly WaterCheckDto[]
  chosen: WaterCheckDto | null
  onChoose: (water: WaterCheckDto) => void
}) {
  if (waters.length < 2) return null
  return (
    <div role="group" aria-label="Water that is used" className="mb-2 flex flex-wrap items-center gap-3">
      <span className={firesideType.small.className}>Water</span>
      {waters.map((water) => (
        <Button
          key={water.id}
          aria-pressed={water.id === chosen?.id}
          className={classNames(
            water.id === chosen?.id && 'border-water! bg-wash font-[640]',
            (!water.isInDate || water.overLimit !== null) && 'text-amber!',
          )}
          onClick={() => onChoose(water)}
        >
          {water.source}
        </Button>
      ))}
    </div>
  )
}
