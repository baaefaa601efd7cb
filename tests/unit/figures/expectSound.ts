import { Window } from 'happy-dom'
import { expect } from 'vitest'
import { boxesMeet, isInside } from '../../../shared/figures/layout.ts'
import type { Figure } from '../../../shared/figures/svg.ts'

/** What must hold for any figure: XML without NaN, a name and a description, texts inside the figure and off one another. */
export function expectSound(figure: Figure): void {
  const { svg, labels, width, height } = figure
  expect(svg).not.toMatch(/NaN|Infinity|undefined|null/)
  expectWellFormed(svg)
  expect(svg).toMatch(/^<svg [^>]*role="img"[^>]*><title>[^<]+<\/title><desc>[^<]+<\/desc>/)
  expect(svg).not.toContain(' style=')
  const frame = { x: -1, y: -2, width: width + 2, height: height + 3 }
  expect(labels.filter(label => !isInside(label, frame)).map(label => `“${label.text}” leaves the figure`)).toEqual([])
  const collisions: string[] = []
  labels.forEach((a, i) => labels.slice(i + 1).forEach((b) => {
    if (boxesMeet(a, b, -1)) collisions.push(`“${a.text}” meets “${b.text}”`)
  }))
  expect(collisions).toEqual([])
  const ids = [...svg.matchAll(/ id="([^"]+)"/g)].map(match => match[1])
  expect(new Set(ids).size).toBe(ids.length)
  const used = new Set([...svg.matchAll(/url\(#([^)]+)\)/g)].map(match => match[1]))
  expect([...used].filter(id => !ids.includes(id))).toEqual([])
}

/** Throws at the first fault of nesting, quoting or escaping. */
export function expectWellFormed(xml: string): void {
  const open: string[] = []
  const rest = xml.replace(/<(\/?)([a-zA-Z]+)((?:\s+[a-zA-Z0-9:-]+="[^"<]*")*)\s*(\/?)>|&(?:amp|lt|gt|quot|#39);|[^<&]/g, (token, close, name, _attributes, empty) => {
    if (!name) return ''
    if (close) expect(open.pop(), `closing of ${name}`).toBe(name)
    else if (!empty) open.push(name)
    return token && ''
  })
  expect(rest).toBe('')
  expect(open).toEqual([])
}

/** The text of an SVG as a browser reads it. */
export function readSvg(svg: string) {
  const window = new Window()
  window.document.body.innerHTML = svg
  return window.document.body.querySelector('svg')!
}
