import type { PairWood } from '@/components/chart/pair-types'
import type { StaveHistoryOptions } from '@/lib/science/stave'
import { staveHistory } from '@/lib/science/stave'

export type WoodRequest = { id: number; options: StaveHistoryOptions }
export type WoodAnswer = { id: number; wood: PairWood | null }

/** The stave's picture of a plan, off the page's own thread, so that typing never waits for it. */
self.onmessage = (event: MessageEvent<WoodRequest>) => {
  const { id, options } = event.data
  self.postMessage({ id, wood: computeWood(options) } satisfies WoodAnswer)
}

function computeWood(options: StaveHistoryOptions): PairWood | null {
  try {
    const { timesS, depthsMm, log10Dose, isotherm100Mm, isotherm150Mm, toastDepthMm } = staveHistory(options)
    return { timesS, depthsMm, log10Dose, isotherm100Mm, isotherm150Mm, toastDepthMm }
  } catch (error) {
    // A plan outside the model's domain has no picture; anything else is a fault and is let through.
    if (error instanceof RangeError) return null
    throw error
  }
}
