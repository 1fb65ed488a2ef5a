import { readFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import type { Page } from 'playwright-core'

/**
 * What a rendered page measures: taken from computed styles, from the font as it is drawn and from boxes on the screen,
 * never from what the code says it wants.
 */
export type MeasuredPage = {
  /** Elements that name the figure that they show; the height of their digits, px. */
  figures: { name: string; digitPx: number; text: string }[]
  /** Every text that is seen: its size, px, and its contrast against what lies under it. */
  texts: { text: string; sizePx: number; contrast: number }[]
  /** Everything that can be touched: its smaller side, px. */
  targets: { name: string; sidePx: number }[]
  /** Texts and targets that are cut off, or lie outside of what can be scrolled to. */
  lost: string[]
  scroll: { widthPx: number; heightPx: number }
}

export async function measurePage(page: Page): Promise<MeasuredPage> {
  return page.evaluate(() => {
    const context = document.createElement('canvas').getContext('2d', { willReadFrequently: true })
    if (context === null) throw new Error('no canvas')
    const openDialog = document.querySelector('dialog[open]')
    const root: ParentNode = openDialog ?? document.body

    const rgbaOf = (colour: string): [number, number, number, number] => {
      context.clearRect(0, 0, 1, 1)
      context.fillStyle = colour
      context.fillRect(0, 0, 1, 1)
      const [r = 0, g = 0, b = 0, a = 0] = context.getImageData(0, 0, 1, 1).data
      return [r, g, b, a / 255]
    }
    const luminance = ([r, g, b]: readonly number[]): number => {
      const linear = [r ?? 0, g ?? 0, b ?? 0].map((value) => {
        const share = value / 255
        return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4
      })
      return 0.2126 * (linear[0] ?? 0) + 0.7152 * (linear[1] ?? 0) + 0.0722 * (linear[2] ?? 0)
    }
    const groundOf = (element: Element): readonly number[] => {
      for (let one: Element | null = element; one !== null; one = one.parentElement) {
        const colour = rgbaOf(getComputedStyle(one).backgroundColor)
        if (colour[3] > 0.99) return colour
      }
      return [255, 255, 255, 1]
    }
    const contrastOf = (element: Element): number => {
      const [a, b] = [luminance(rgbaOf(getComputedStyle(element).color)), luminance(groundOf(element))]
      return (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05)
    }
    const isSeen = (element: Element): boolean => {
      const box = element.getBoundingClientRect()
      const style = getComputedStyle(element)
      if (box.width <= 1 || box.height <= 1 || style.visibility === 'hidden') return false
      return !(style.position === 'absolute' && style.clipPath === 'inset(50%)') && style.opacity !== '0'
    }
    const isLost = (element: Element): boolean => {
      const box = element.getBoundingClientRect()
      const { scrollWidth, scrollHeight } = document.documentElement
      if (box.left + scrollX < -1 || box.right + scrollX > scrollWidth + 1) return true
      if (box.top + scrollY < -1 || box.bottom + scrollY > scrollHeight + 1) return true
      for (let one = element.parentElement; one !== null; one = one.parentElement) {
        const style = getComputedStyle(one)
        const outer = one.getBoundingClientRect()
        const isCutX = style.overflowX === 'hidden' || style.overflowX === 'clip'
        const isCutY = style.overflowY === 'hidden' || style.overflowY === 'clip'
        const isClamped = style.textOverflow === 'ellipsis' || style.webkitLineClamp !== 'none'
        if (isClamped) continue
        if (isCutX && (box.left < outer.left - 2 || box.right > outer.right + 2)) return true
        if (isCutY && (box.top < outer.top - 2 || box.bottom > outer.bottom + 2)) return true
      }
      return false
    }
    const wordsOf = (element: Element) => (element.textContent ?? '').replace(/\s+/g, ' ').trim().slice(0, 60)

    const figures = [...document.querySelectorAll('[data-figure]')].filter(isSeen).map((element) => {
      const style = getComputedStyle(element)
      context.font = `${style.fontWeight} ${style.fontSize} ${style.fontFamily}`
      return {
        name: element.getAttribute('data-figure') ?? '',
        digitPx: context.measureText('0').actualBoundingBoxAscent,
        text: wordsOf(element),
      }
    })
    const owners = new Set<Element>()
    const walker = document.createTreeWalker(root, NodeFilter.SHOW_TEXT)
    for (let node = walker.nextNode(); node !== null; node = walker.nextNode()) {
      const owner = node.parentElement
      if (owner === null || (node.textContent ?? '').trim() === '') continue
      const isDrawn = owner.closest('svg, script, style, noscript, option, datalist') === null
      if (isDrawn && isSeen(owner) && owner.closest('[disabled], .sr-only') === null) owners.add(owner)
    }
    const texts = [...owners].map((owner) => ({
      text: wordsOf(owner),
      sizePx: Number.parseFloat(getComputedStyle(owner).fontSize),
      contrast: contrastOf(owner),
    }))
    const touched = [...root.querySelectorAll('button, a[href], input, select, textarea, summary')].filter(
      isSeen,
    )
    const targets = touched.map((element) => {
      // A tick or a choice is touched by its label.
      const isChoice = element instanceof HTMLInputElement && /radio|checkbox/.test(element.type)
      const box = ((isChoice ? element.closest('label') : null) ?? element).getBoundingClientRect()
      return {
        name: `${element.tagName.toLowerCase()} ${element.getAttribute('aria-label') ?? wordsOf(element)}`,
        sidePx: Math.min(box.width, box.height),
      }
    })
    const lost = [...owners, ...touched].filter(isLost).map(wordsOf)
    const { scrollWidth: widthPx, scrollHeight: heightPx } = document.documentElement
    return { figures, texts, targets, lost, scroll: { widthPx, heightPx } }
  })
}

const axePath = createRequire(import.meta.url).resolve('axe-core/axe.min.js')

/** Rules of axe that the page breaks, each with the first elements that do. */
export async function axeViolations(page: Page): Promise<string[]> {
  await page.evaluate(await readFile(axePath, 'utf8'))
  return page.evaluate(async () => {
    const axe: unknown = Reflect.get(globalThis, 'axe')
    if (typeof axe !== 'object' || axe === null) throw new Error('axe is not there')
    const run: unknown = Reflect.get(axe, 'run')
    if (typeof run !== 'function') throw new Error('axe does not run')
    const result: { violations: { id: string; nodes: { html: string }[] }[] } = await run.call(axe, document)
    return result.violations.map(
      ({ id, nodes }) =>
        `${id}: ${nodes
          .slice(0, 3)
          .map((node) => node.html.slice(0, 120))
          .join(' | ')}`,
    )
  })
}
