import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkCharacter, checksOut, labelAlphabet } from '#shared/labels/checkCharacter'
import {
  labelFor,
  parseLabel,
  parseTyped,
  replacementLabel,
  sidedCode,
  type LabelSide,
} from '#shared/labels/labels'

const sides: (LabelSide | null)[] = [null, 'left', 'right']
const codes = ['S', 'B'].flatMap((kind) =>
  Array.from({ length: 1999 }, (_each, index) => `${kind}${index + 1}`),
)
const everyLabel = codes.flatMap((code) => sides.map((side) => labelFor(code, side)))
const anyCode = fc
  .tuple(fc.constantFrom('S', 'B'), fc.integer({ min: 1, max: 999_999 }), fc.constantFrom(...sides))
  .map(([kind, number, side]) => ({ code: `${kind}${number}`, side }))

describe('the alphabet of labels', () => {
  it('has no character that moves with the keyboard layout or that reads like another', () => {
    expect([...labelAlphabet].filter((character) => 'AQWZYMIO'.includes(character))).toEqual([])
    expect(new Set(labelAlphabet).size).toBe(28)
    expect(labelAlphabet).toMatch(/^[0-9B-Z]+$/)
  })
})

describe('the check character', () => {
  it('makes every label of every code check out', () => {
    expect(everyLabel.every(checksOut)).toBe(true)
    expect(everyLabel.every((label) => label.endsWith(checkCharacter(label.slice(0, -1)) ?? '?'))).toBe(true)
  })

  it('finds every single wrong character in every label up to 1999', () => {
    let tried = 0
    for (const label of everyLabel) {
      for (let at = 0; at < label.length; at++) {
        for (const wrong of labelAlphabet) {
          if (wrong === label.charAt(at)) continue
          tried++
          if (checksOut(label.slice(0, at) + wrong + label.slice(at + 1)))
            throw new Error(`${label}, place ${at}: ${wrong}`)
        }
      }
    }
    expect(tried).toBeGreaterThan(1_500_000)
  })

  it('finds every swap of two neighbours, and across one character, in every label up to 1999', () => {
    let tried = 0
    for (const label of everyLabel) {
      for (const distance of [1, 2]) {
        for (let at = 0; at + distance < label.length; at++) {
          const swapped = [...label]
          const [first = '', second = ''] = [label.charAt(at), label.charAt(at + distance)]
          if (first === second) continue
          swapped[at] = second
          swapped[at + distance] = first
          tried++
          if (checksOut(swapped.join(''))) throw new Error(`${label} and ${swapped.join('')}`)
        }
      }
    }
    expect(tried).toBeGreaterThan(80_000)
  })

  it('finds them for every pair of characters at every place, whatever the text', () => {
    // the sum is linear: an error at a place is found whatever the other characters are, so one text per length does
    for (let length = 2; length <= 9; length++) {
      const text = '0'.repeat(length)
      for (let at = 0; at < length; at++) {
        for (const wrong of labelAlphabet.slice(1)) {
          expect(checksOut(text.slice(0, at) + wrong + text.slice(at + 1))).toBe(false)
        }
      }
      for (let at = 0; at + 1 < length; at++) {
        for (const first of labelAlphabet) {
          for (const second of labelAlphabet) {
            if (first === second) continue
            const before = text.slice(0, at) + first + second + text.slice(at + 2)
            const after = text.slice(0, at) + second + first + text.slice(at + 2)
            expect(checksOut(before + (checkCharacter(before) ?? ''))).toBe(true)
            expect(checksOut(after + (checkCharacter(before) ?? ''))).toBe(false)
          }
        }
      }
    }
  })
})

describe('a label', () => {
  it('names the ski or boot that it was made for, in capitals or small letters', () => {
    fc.assert(
      fc.property(anyCode, fc.boolean(), ({ code, side }, small) => {
        const label = labelFor(code, side)
        expect(parseLabel(small ? label.toLowerCase() : label)).toEqual({
          ok: true,
          kind: code.startsWith('S') ? 'ski' : 'boot',
          code,
          side,
          text: label,
        })
      }),
    )
  })

  it('differs between left and right in two places, so that no single error makes one of the other', () => {
    const [left, right] = [labelFor('S417', 'left'), labelFor('S417', 'right')]
    expect(left.slice(0, 5)).toBe('S417L')
    expect(right.slice(0, 5)).toBe('S417R')
    expect(left.at(-1)).not.toBe(right.at(-1))
  })

  it('that was misread is refused and not taken for another', () => {
    fc.assert(
      fc.property(anyCode, fc.nat(), fc.constantFrom(...labelAlphabet), ({ code, side }, place, wrong) => {
        const label = labelFor(code, side)
        const at = place % label.length
        fc.pre(label.charAt(at) !== wrong)
        expect(parseLabel(label.slice(0, at) + wrong + label.slice(at + 1)).ok).toBe(false)
      }),
      { numRuns: 3000 },
    )
  })

  it('says why it was refused', () => {
    const label = labelFor('S417', 'left')
    const wrong = label.slice(0, -1) + (label.endsWith('X') ? 'V' : 'X')
    expect(parseLabel(wrong)).toEqual({ ok: false, reason: 'check_character' })
    expect(parseLabel('S417L')).toEqual({ ok: false, reason: 'unfinished' })
    expect(parseLabel('S')).toEqual({ ok: false, reason: 'unfinished' })
    for (const foreign of [
      '',
      '4006381333931',
      'K417LX',
      'S0417LX',
      'HTTPS://EXAMPLE.TEST',
      'S1234567LX',
      '§$%',
    ]) {
      expect(parseLabel(foreign)).toEqual({ ok: false, reason: 'not_ours' })
    }
  })

  it('is not made for a code that is not ours', () => {
    for (const code of ['S', 'S0', 'X12', 'S12L', 's12'])
      expect(() => labelFor(code, 'left')).toThrow(RangeError)
  })
})

describe('a code typed by hand', () => {
  it('needs no check character', () => {
    expect(parseTyped('s417')).toEqual({
      ok: true,
      kind: 'ski',
      code: 'S417',
      side: null,
      text: 'S417',
      checked: false,
    })
    expect(parseTyped(' b 288 r ')).toEqual({
      ok: true,
      kind: 'boot',
      code: 'B288',
      side: 'right',
      text: 'B288R',
      checked: false,
    })
  })

  it('may have one, and then it is judged', () => {
    const label = labelFor('S417', 'right')
    expect(parseTyped(label)).toMatchObject({
      ok: true,
      code: 'S417',
      side: 'right',
      text: label,
      checked: true,
    })
    const wrong = label.slice(0, -1) + (label.endsWith('X') ? 'V' : 'X')
    expect(parseTyped(wrong)).toEqual({ ok: false, reason: 'not_ours' })
    expect(parseTyped('S')).toEqual({ ok: false, reason: 'unfinished' })
  })

  it('is what sidedCode writes', () => {
    expect([sidedCode('S417', 'left'), sidedCode('B288', 'right'), sidedCode('S417', null)]).toEqual([
      'S417L',
      'B288R',
      'S417',
    ])
  })
})

describe('a label that takes the place of a lost one', () => {
  it('reads as ours, carries the code, and is no other label of this shop', () => {
    const texts = codes.flatMap((code) =>
      (['left', 'right'] as const).flatMap((side) =>
        [1, 2, 9].map((before) => replacementLabel(code, side, before)!),
      ),
    )
    expect(new Set([...texts, ...everyLabel]).size).toBe(texts.length + everyLabel.length)
    expect(texts.every((text) => parseLabel(text).ok)).toBe(true)
    expect(replacementLabel('S417', 'left', 1)?.slice(0, -1)).toBe('S100417L')
    expect(replacementLabel('B99999', 'right', 9)?.slice(0, -1)).toBe('B999999R')
  })

  it('is not made for what has no label yet, for the tenth time, or for a code that is not ours', () => {
    expect(replacementLabel('S417', 'left', 0)).toBeNull()
    expect(replacementLabel('S417', 'left', 10)).toBeNull()
    for (const code of ['S', 'X417', 'S100417'])
      expect(() => replacementLabel(code, 'left', 1)).toThrow(RangeError)
  })
})
