import type { ThermocoupleType } from '@/lib/science/thermocouple'
import type { HearthProbe, HearthReading } from './hearth'
import { createRandom } from './random'
import {
  createColdJunction,
  createThermocouple,
  readThermocouple,
  stepColdJunction,
  stepThermocouple,
} from './thermocouple'

export type IdleHearth = { advance: (dtS: number) => { readings: HearthReading[] } }

type IdleOptions = {
  seed: number
  roomTempC?: number
  thermocoupleTypes?: Partial<Record<HearthProbe, ThermocoupleType>>
  /** What the probes showed last, °C; they fall or rise from there to the room and the banked fire. */
  startTempC?: Partial<Record<HearthProbe, number>>
}

const AIR_LAG_S = 240
const COALS_LAG_S = 1_500
const BANKED_COALS_C = 180

/** A hearth without a barrel: probes hang in the room, the fire is banked. */
export function createIdleHearth(options: IdleOptions): IdleHearth {
  const roomTempC = options.roomTempC ?? 18
  const random = createRandom(options.seed).fork('idle')
  const coldJunction = createColdJunction(roomTempC, random)
  const create = (probe: HearthProbe, startTempC: number, lagS: number) =>
    createThermocouple(
      options.thermocoupleTypes?.[probe] ?? 'K',
      options.startTempC?.[probe] ?? startTempC,
      lagS,
    )
  const probes = {
    lead: create('lead', roomTempC, AIR_LAG_S),
    opposite: create('opposite', roomTempC, AIR_LAG_S),
    coals: create('coals', BANKED_COALS_C, COALS_LAG_S),
  }
  let timeS = 0
  const read = (probe: HearthProbe): HearthReading => ({
    probe,
    timeS,
    emf: readThermocouple(probes[probe], coldJunction, random),
  })
  return {
    advance: (dtS) => {
      timeS += dtS
      stepColdJunction(coldJunction, dtS, random)
      stepThermocouple(probes.lead, roomTempC + 4, dtS)
      stepThermocouple(probes.opposite, roomTempC + 3, dtS)
      stepThermocouple(probes.coals, BANKED_COALS_C, dtS)
      return { readings: [read('lead'), read('opposite'), read('coals')] }
    },
  }
}
