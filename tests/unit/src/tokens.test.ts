import { readFileSync } from 'node:fs'
import { resolve } from 'node:path'
import { describe, expect, it } from 'vitest'

const css = readFileSync(resolve(import.meta.dirname, '../../../src/assets/tokens.css'), 'utf8')

/** Relative luminance and contrast after WCAG 2.2, "relative luminance" and "contrast ratio". */
function luminance(hex: string): number {
  const channels = [1, 3, 5].map((at) => parseInt(hex.slice(at, at + 2), 16) / 255)
  const [r, g, b] = channels.map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4))
  return 0.2126 * r! + 0.7152 * g! + 0.0722 * b!
}
function contrast(a: string, b: string): number {
  const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y)
  return (high! + 0.05) / (low! + 0.05)
}
const colours = Object.fromEntries(
  [...css.matchAll(/--([\w-]+): (#[0-9a-f]{6});/g)].map(([, name, hex]) => [name!, hex!]),
)
const hues = ['spruce', 'larch', 'lake', 'madder', 'moss']

describe('the colours', () => {
  it.each(['ink', 'ink-soft', ...hues])('%s is readable on every ground', (name) => {
    for (const ground of ['paper', 'snow', 'ice']) {
      expect(contrast(colours[name]!, colours[ground]!), ground).toBeGreaterThanOrEqual(4.5)
    }
  })

  it.each(hues)('%s and ink are readable on its wash, and the text on it too', (name) => {
    const wash = colours[`${name}-wash`]!
    for (const text of [name, 'ink', 'ink-soft']) {
      expect(contrast(colours[text]!, wash), text).toBeGreaterThanOrEqual(4.5)
    }
    expect(contrast(colours[name]!, colours[`on-${name}`]!)).toBeGreaterThanOrEqual(4.5)
  })

  it('the border of a control stands out on every ground', () => {
    for (const ground of ['paper', 'snow', 'ice']) {
      expect(contrast(colours.edge!, colours[ground]!), ground).toBeGreaterThanOrEqual(3)
    }
  })
})
