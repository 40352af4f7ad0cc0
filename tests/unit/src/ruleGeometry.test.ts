import { describe, expect, it } from 'vitest'
import { junior, ladder, oneLever, withScrew } from '../../../src/components/design/sampleTracks'
import { notchX, printedMarks, printEvery, ruleGeometry } from '../../../src/components/rule/ruleGeometry'

const tracks = { ladder, withScrew, oneLever, junior }

describe('the notch rule', () => {
  it.each(Object.entries(tracks))('draws %s to one scale on both rails', (_name, track) => {
    const geometry = ruleGeometry(track, 700, 'large')
    for (const unit of ['toe', 'heel'] as const) {
      const [first, second] = geometry.rails[unit].ticks
      expect(Math.abs(second!.x - first!.x)).toBeCloseTo(track[unit].notchMm * geometry.pxPerMm, 6)
      expect(geometry.rails[unit].ticks).toHaveLength(track[unit].last - track[unit].first + 1)
    }
  })

  it('has the tail on the left: notches outward go left at the heel and right at the toe', () => {
    const geometry = ruleGeometry(ladder, 700, 'large')
    expect(notchX(geometry, 'heel', 6)!).toBeLessThan(notchX(geometry, 'heel', 4)!)
    expect(notchX(geometry, 'toe', 6)!).toBeGreaterThan(notchX(geometry, 'toe', 4)!)
    expect(notchX(geometry, 'heel', 0)!).toBeLessThan(notchX(geometry, 'toe', 0)!)
  })

  it.each([320, 480, 700, 760])('keeps everything inside %i px', (width) => {
    for (const track of Object.values(tracks)) {
      const { rails } = ruleGeometry(track, width, 'large')
      expect(rails.heel.from).toBeGreaterThanOrEqual(0)
      expect(rails.toe.to).toBeLessThan(width)
      expect(rails.heel.to).toBeLessThan(rails.toe.from)
    }
  })

  it("counts from the rail's own first notch", () => {
    const geometry = ruleGeometry(junior, 700, 'large')
    expect(geometry.rails.heel.ticks[0]).toMatchObject({ notch: 1, mark: '1' })
    expect(notchX(geometry, 'heel', 0)).toBeNull()
  })

  it('prints the marks of the rail, not the numbers of the notches', () => {
    const printed = ruleGeometry(oneLever, 760, 'large').rails.toe.ticks.filter((tick) => tick.printed)
    expect(printed.every(({ mark }) => Number(mark) >= 260)).toBe(true)
    expect(ruleGeometry(junior, 760, 'large').rails.toe.ticks[0]!.mark).toBe('A')
  })

  it('prints round numbers where the rail has numbers', () => {
    expect(printedMarks(['1', '2', '3', '4', '5', '6', '7', '8'], 4)).toEqual([
      false,
      false,
      false,
      true,
      false,
      false,
      false,
      true,
    ])
    expect(printedMarks(['A', 'B', 'C'], 2)).toEqual([true, false, true])
  })

  it('leaves room between printed marks', () => {
    expect(printEvery(['0', '16'], 100)).toBe(1)
    expect(printEvery(['260', '265'], 10) * 10).toBeGreaterThan(27)
  })
})
