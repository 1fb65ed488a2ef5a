import type { ProbeCheckDto } from '@/lib/probes/schema'

/** One point of a probe check: what to prepare, and the caution. */
export type CheckPoint = {
  kind: ProbeCheckDto['kind']
  title: string
  /** In order, in the imperative. */
  steps: readonly string[]
  caution: string
}

const follow = 'Follow local code and the responsible person.'

export const checkPoints: readonly CheckPoint[] = [
  {
    kind: 'ice',
    title: 'Melting ice',
    steps: [
      'Fill a flask with crushed ice of clean water, then pour in just enough cold water to fill the gaps.',
      'Stir, wait five minutes, and stir again; pour off water when the ice floats.',
      'Put the probe’s tip in the middle of the ice, at least ten of its diameters deep, not on the glass.',
    ],
    caution: `Keep water away from the gateway, its plugs and the mains. ${follow}`,
  },
  {
    kind: 'boiling',
    title: 'Boiling water',
    steps: [
      'Bring clean water to a full, rolling boil in a deep pot.',
      'Hang the probe’s tip in the middle of the water, clear of the bottom and the sides.',
      'Read the station pressure: the pressure here, not the one reduced to sea level that forecasts give.',
    ],
    caution: `Boiling water and steam scald: a firm stand, gloves and eye protection, the lead clear of the flame. ${follow}`,
  },
  {
    kind: 'block',
    title: 'Dry block or reference thermometer',
    steps: [
      'Set the block to where the dose is made, and let it stand until its own display has been steady for ten minutes.',
      'Put the probe to the bottom of a well that fits it, beside the reference thermometer if there is one.',
      'Take the reference from its certificate, corrected; its uncertainty stands there too.',
    ],
    caution: `The block and the probe’s sheath burn long after they are switched off: gloves, a dry bench, and nothing wet into a hot well. ${follow}`,
  },
]

/** A day's pressure differs from the standard atmosphere's by up to some 30 hPa, 0.85 °C at the boil (from memory). */
export const altitudeUncertaintyC = 0.85
/** Steps of what a person reads by eye, °C. */
export const eyeResolutionC = 0.1
/** Stored readings are kept to 0.01 °C. */
export const liveResolutionC = 0.01
/** Further apart than this is no check but a wrong type, a wrong lead or the wrong probe, °C. */
export const farthestC = 20
