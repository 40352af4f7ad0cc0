import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { labelAlphabet } from '#shared/labels/checkCharacter'
import { labelFor, parseLabel } from '#shared/labels/labels'
import {
  looksLikeScan,
  noScan,
  sameCodeMs,
  scanStep,
  seeCode,
  type KeyStroke,
  type RecentCodes,
  type Scan,
  type ScanState,
} from '#shared/labels/scanDetector'
import { charFromKey } from '#shared/labels/wedge'

/** Every scan in a series of strokes. */
function scansIn(strokes: KeyStroke[]): Scan[] {
  let state: ScanState = noScan
  return strokes.flatMap((stroke) => {
    const step = scanStep(state, stroke)
    state = step.state
    return step.scan ? [step.scan] : []
  })
}

const codeOf = (character: string) => {
  if (/\d/.test(character)) return `Digit${character}`
  return /[a-z]/i.test(character) ? `Key${character.toUpperCase()}` : ''
}
const enter = { code: 'Enter', key: 'Enter' }

/** Strokes with the given pauses before each; the first pause counts from the start. */
function strokes(keys: { code: string; key: string }[], gapsMs: number[], startMs = 0): KeyStroke[] {
  let atMs = startMs
  return keys.map((key, index) => ({ ...key, atMs: (atMs += gapsMs[index] ?? 0) }))
}
const typed = (text: string) => [...text].map((key) => ({ code: codeOf(key), key }))

const anyLabel = fc
  .tuple(
    fc.constantFrom('S', 'B'),
    fc.integer({ min: 10, max: 99_999 }),
    fc.constantFrom('left' as const, 'right' as const),
  )
  .map(([kind, number, side]) => labelFor(`${kind}${number}`, side))
const thousand = { numRuns: 1000, seed: 417 }

describe('a key', () => {
  /** What the keys of the label alphabet give in other layouts, with and without shift or caps lock. */
  const azertyDigits = ['à', '&', 'é', '"', "'", '(', '-', 'è', '_', 'ç']

  it('is the same character on QWERTY, QWERTZ and AZERTY, with shift and with caps lock', () => {
    for (const character of labelAlphabet) {
      const keys = /\d/.test(character)
        ? [character, azertyDigits[Number(character)] ?? '', '=', '!']
        : [character, character.toLowerCase()]
      for (const key of keys) expect(charFromKey({ code: codeOf(character), key })).toBe(character)
    }
    expect(charFromKey({ code: 'Numpad7', key: 'Home' })).toBe('7')
  })

  it('is read by its character where the event does not tell its place', () => {
    expect(['s', 'S', '4', 'x'].map((key) => charFromKey({ code: '', key }))).toEqual(['S', 'S', '4', 'X'])
    expect(charFromKey({ code: 'Unidentified', key: 'l' })).toBe('L')
  })

  it('that is no character is none', () => {
    for (const key of ['Backspace', 'ArrowLeft', 'F5', 'Unidentified', 'Dead', '']) {
      expect(charFromKey({ code: key, key })).toBeNull()
    }
  })
})

describe('a scanner', () => {
  it('is always recognised: 1,000 labels at any scanner speed', () => {
    fc.assert(
      fc.property(
        anyLabel,
        fc.array(fc.integer({ min: 0, max: 28 }), { minLength: 10, maxLength: 10 }),
        fc.constantFrom('Enter', 'Tab', 'NumpadEnter'),
        fc.boolean(),
        (label, gaps, end, small) => {
          const keys = [
            ...typed(small ? label.toLowerCase() : label),
            { code: end, key: end.replace('Numpad', '') },
          ]
          const scans = scansIn(strokes(keys, gaps, 5000))
          expect(scans.map((scan) => scan.text)).toEqual([label])
          expect(parseLabel(scans[0]?.text ?? '').ok).toBe(true)
        },
      ),
      thousand,
    )
  })

  it('is recognised when one key comes late, when it presses shift, and right after hand typing', () => {
    const label = labelFor('S417', 'left')
    expect(scansIn(strokes([...typed(label), enter], [0, 8, 8, 55, 8, 8, 8]))).toHaveLength(1)
    const shifted = typed(label).flatMap((key) => [{ code: 'ShiftLeft', key: 'Shift' }, key])
    expect(scansIn(strokes([...shifted, enter], Array(13).fill(6)))).toMatchObject([{ text: label }])
    const afterWord = strokes(
      [...typed('anna'), ...typed(label), enter],
      [0, 120, 140, 110, 200, 5, 5, 5, 5, 5, 5],
    )
    expect(scansIn(afterWord)).toMatchObject([{ text: label }])
  })

  it('may read what is not ours: it is a scan, and the label says not ours', () => {
    const scans = scansIn(strokes([...typed('4006381333931'), enter], Array(14).fill(4)))
    expect(scans).toMatchObject([{ text: '4006381333931' }])
    expect(parseLabel(scans[0]?.text ?? '')).toEqual({ ok: false, reason: 'not_ours' })
  })

  it('reads 30 labels one after another', () => {
    const labels = Array.from({ length: 30 }, (_each, index) => labelFor(`S${400 + index}`, 'left'))
    const all = labels.flatMap((label, index) =>
      strokes([...typed(label), enter], Array(7).fill(9), index * 400),
    )
    expect(scansIn(all).map((scan) => scan.text)).toEqual(labels)
  })

  it('is suspected after three fast characters, so that a field can be kept as it was', () => {
    const states = (gap: number) => {
      let state: ScanState = noScan
      return strokes(typed('S417'), Array(4).fill(gap)).map((stroke) =>
        looksLikeScan((state = scanStep(state, stroke).state)),
      )
    }
    expect(states(8)).toEqual([false, false, true, true])
    expect(states(90)).toEqual([false, false, false, false])
  })
})

describe('a hand', () => {
  /** Pauses of a hand: mostly 60 to 300 ms, with bursts in which up to three keys are rolled over very fast. */
  const hand = (length: number) =>
    fc
      .array(fc.tuple(fc.integer({ min: 61, max: 300 }), fc.boolean(), fc.integer({ min: 2, max: 60 })), {
        minLength: length + 1,
        maxLength: length + 1,
      })
      .map((pauses) => {
        let rolled = 0
        return pauses.map(([pause, rolls, fast]) => {
          rolled = rolls && rolled < 2 ? rolled + 1 : 0
          return rolled > 0 ? fast : pause
        })
      })
  const text = fc.oneof(
    anyLabel,
    fc.string({ minLength: 1, maxLength: 24 }),
    fc.constantFrom('Maria', 'S417L', '70,5', 'anna.k@example.test', '305'),
  )

  it('is never taken for a scanner: 1,000 texts in bursts, ended with Enter', () => {
    fc.assert(
      fc.property(
        text.chain((each) => fc.tuple(fc.constant(each), hand([...each].length))),
        ([each, gaps]) => {
          expect(scansIn(strokes([...typed(each), enter], gaps, 1000))).toEqual([])
        },
      ),
      thousand,
    )
  })

  it('at a steady 31 ms a key, faster than any, is not taken for a scanner', () => {
    expect(scansIn(strokes([...typed('S417LX'), enter], Array(7).fill(31)))).toEqual([])
  })

  it('that pastes a label, by a shortcut and Enter, makes no scan: 1,000 labels', () => {
    fc.assert(
      fc.property(anyLabel, fc.integer({ min: 0, max: 40 }), (label, gap) => {
        // the pasted text itself comes as no stroke at all, or from some devices as one stroke with the whole text
        const keys = [
          { code: 'ControlLeft', key: 'Control' },
          { code: 'KeyV', key: 'v' },
          { code: '', key: label },
          enter,
        ]
        const all = strokes(keys, [0, gap, gap, gap]).map((stroke, index) => ({
          ...stroke,
          withShortcutKey: index < 2,
        }))
        expect(scansIn(all)).toEqual([])
      }),
      thousand,
    )
  })

  it('that holds a key, corrects or walks with the arrows makes no scan', () => {
    const held = strokes([...typed('SSSSSSSS'), enter], Array(9).fill(20)).map((stroke, index) => ({
      ...stroke,
      repeat: index > 0 && index < 8,
    }))
    expect(scansIn(held)).toEqual([])
    const corrected = [...typed('S4'), { code: 'Backspace', key: 'Backspace' }, ...typed('17'), enter]
    expect(scansIn(strokes(corrected, Array(6).fill(10)))).toEqual([])
  })
})

describe('the same code', () => {
  it('within two seconds is already scanned, also with another one in between, and afterwards is new', () => {
    let recent: RecentCodes = new Map()
    const see = (code: string, atMs: number) => {
      const seen = seeCode(recent, code, atMs)
      recent = seen.recent
      return seen.already
    }
    const [left, right] = [labelFor('S417', 'left'), labelFor('S417', 'right')]
    expect(see(left, 1000)).toBe(false)
    expect(see(right, 1500)).toBe(false)
    expect(see(left, 2000)).toBe(true)
    expect(see(left, 2000 + sameCodeMs - 1)).toBe(true)
    expect(see(left, 2000 + 2 * sameCodeMs - 1)).toBe(false)
    expect(see(right, 9000)).toBe(false)
    expect(recent.size).toBe(1)
  })
})
