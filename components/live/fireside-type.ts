/**
 * Sizes at the fireside, px of the stated panel: 13.3 inches, 1280 × 800, 0.224 mm a pixel (LOOK "Type", TARGETS).
 * Letters are measured by the height of their capitals and figures.
 */

export const PANEL = { widthPx: 1280, heightPx: 800, mmPerPx: 0.224 } as const

/** Height of capitals and figures as a share of the type's size (Atkinson Hyperlegible Next, its own metrics: 668/1000). */
export const CAP_SHARE = 0.668

/** The class is what the screen uses; the px beside it is what the test measures. */
export const firesideType = {
  /** Wood temperature, stage time, hearth number: 20 arc-minutes at 3 m. */
  numeral: { px: 120, className: 'text-[120px] leading-[0.8] font-[640]' },
  /** Next action, dose, alarm, NO READING: 16 arc-minutes at 2 m. */
  action: { px: 63, className: 'text-[63px] leading-[0.95] font-[640]' },
  /** Marks and the main action. */
  mark: { px: 28, className: 'text-[28px] leading-[1.1] font-[560]' },
  label: { px: 22, className: 'text-[22px] leading-[1.25]' },
  text: { px: 20, className: 'text-[20px] leading-[1.25]' },
  small: { px: 18, className: 'text-[18px] leading-[1.2]' },
} as const

/**
 * The room is read from 4 m by those who stand at another hearth: its figures fill at least 10 arc-minutes there, twice
 * what normal sight resolves (5 arc-minutes a letter, Snellen's 20/20). On a wall screen 12 and more. Words are for
 * whoever comes nearer.
 */
export const roomType = {
  numeral: { px: 92, className: 'text-[92px] leading-[0.85] font-[640]' },
  /** With five or six hearths on the screen. */
  numeralTight: { px: 80, className: 'text-[80px] leading-[0.85] font-[640]' },
  wall: { px: 116, className: 'text-[116px] leading-[0.85] font-[640]' },
  wallTight: { px: 96, className: 'text-[96px] leading-[0.8] font-[640]' },
  words: { px: 26, className: 'text-[26px] leading-[1.1]' },
  wallWords: { px: 30, className: 'text-[30px] leading-[1.05]' },
  label: { px: 20, className: 'text-[20px] leading-[1.2]' },
} as const

/** Gloves: 19 mm. */
export const TARGET_PX = 85

/** Height that letters of a size fill, in arc-minutes, seen from `distanceM`. */
export function letterArcMinutes(px: number, distanceM: number): number {
  const heightMm = px * CAP_SHARE * PANEL.mmPerPx
  return (Math.atan(heightMm / (distanceM * 1000)) * 180 * 60) / Math.PI
}

/** A length on the panel, mm. */
export function panelMm(px: number): number {
  return px * PANEL.mmPerPx
}
