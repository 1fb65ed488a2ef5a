import { PairCanvas } from './pair-canvas'
import type { PairCanvasProps } from './pair-canvas'
import { SmallPair } from './small-pair'
import type { SmallPairProps } from './small-pair'

export type { DraggedPoint, PairHandle, PairProps, PairSeries, PairWood } from './pair-types'

/**
 * The pair: fire above, wood below, one time axis. Large and medium draw in the browser and follow a live
 * firing through a handle (`ref`); small is plain SVG, rendered wherever the page is.
 */
export function Pair(props: PairCanvasProps & Pick<SmallPairProps, 'widthPx' | 'heightPx' | 'woodShare'>) {
  const { widthPx, heightPx, woodShare, ...canvas } = props
  if (props.size !== 'small') return <PairCanvas {...canvas} />
  const { ref: _ref, onDragPoint: _onDragPoint, onDragEnd: _onDragEnd, ...small } = canvas
  return <SmallPair {...small} widthPx={widthPx} heightPx={heightPx} woodShare={woodShare} />
}
