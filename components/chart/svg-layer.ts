/** A drawn thing, as data: what the overlay says, apart from how it gets onto the screen. */
export type SvgNode =
  | { tag: 'path' | 'rect' | 'circle' | 'line'; attributes: Readonly<Record<string, string | number>> }
  | { tag: 'text'; attributes: Readonly<Record<string, string | number>>; words: string }

const SVG = 'http://www.w3.org/2000/svg'

/** Makes the layer's children equal to `nodes`, touching only what differs. */
export function paintSvgLayer(layer: SVGElement, nodes: readonly SvgNode[]): void {
  nodes.forEach((node, index) => {
    const element = elementAt(layer, index, node.tag)
    for (const attribute of [...element.attributes]) {
      if (!(attribute.name in node.attributes)) element.removeAttribute(attribute.name)
    }
    for (const [name, value] of Object.entries(node.attributes)) {
      const text = typeof value === 'number' ? String(Math.round(value * 100) / 100) : value
      if (element.getAttribute(name) !== text) element.setAttribute(name, text)
    }
    if (node.tag === 'text' && element.textContent !== node.words) element.textContent = node.words
  })
  while (layer.childNodes.length > nodes.length) layer.lastChild?.remove()
}

function elementAt(layer: SVGElement, index: number, tag: string): Element {
  const present = layer.children[index]
  if (present?.tagName === tag) return present
  const made = document.createElementNS(SVG, tag)
  if (present === undefined) layer.append(made)
  else present.replaceWith(made)
  return made
}
