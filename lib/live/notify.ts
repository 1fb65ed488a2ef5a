import { hubDoor } from '@/lib/live/hub-door'

/** What changed, in one word; viewers fetch again what they show of it. */
export type FiringChange =
  | 'started'
  | 'phase'
  | 'mark'
  | 'probe'
  | 'placement'
  | 'finished'
  | 'abandoned'
  | 'sealed'
  | 'scored'
  | 'details'

/**
 * Tells the live hub that a firing's rows have changed: it reads the firing again and tells its viewers. Call it
 * after the commit. Does nothing where no hub runs; never throws.
 */
export function notifyFiringChanged(firingId: string, what: FiringChange): void {
  hubDoor().current?.firingChanged(firingId, what)
}

/** Tells the live hub that hands have moved an alarm of a firing. Call it after the commit; never throws. */
export function notifyAlarmsChanged(firingId: string): void {
  hubDoor().current?.alarmsChanged(firingId)
}
