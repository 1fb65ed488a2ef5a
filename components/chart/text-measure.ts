import type { MeasureText } from './pair-layout'

/** Measures words as the browser sets them (tabular figures included), remembering each. */
export function createTextMeasure(layer: SVGSVGElement): { measure: MeasureText; forget: () => void } {
  const known = new Map<string, number>()
  const probe = document.createElementNS('http://www.w3.org/2000/svg', 'text')
  probe.setAttribute('visibility', 'hidden')
  layer.append(probe)
  const measure: MeasureText = (words, style) => {
    // Figures are tabular: every digit is as wide as a nought, so a running clock is measured once.
    const alike = words.replaceAll(/\d/g, '0')
    const key = `${style.px}|${style.weight}|${alike}`
    const before = known.get(key)
    if (before !== undefined) return before
    probe.setAttribute('font-size', String(style.px))
    probe.setAttribute('font-weight', String(style.weight))
    probe.textContent = alike
    const width = typeof probe.getComputedTextLength === 'function' ? probe.getComputedTextLength() : 0
    const answer = width > 0 ? width : words.length * style.px * 0.56
    known.set(key, answer)
    return answer
  }
  return { measure, forget: () => known.clear() }
}
