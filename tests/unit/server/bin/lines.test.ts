import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { linesOf, type Line } from '../../../../server/bin/lines'

async function* stream(chunks: Buffer[]) {
  yield* chunks
}

async function read(chunks: Buffer[], longest?: number): Promise<Line[]> {
  const lines: Line[] = []
  for await (const each of linesOf(stream(chunks), longest)) lines.push(...each)
  return lines
}

describe('lines of a stream', () => {
  it('are the same however the bytes were cut, also inside a letter of several bytes', async () => {
    const line = fc.string({ unit: 'grapheme', maxLength: 12 }).map((text) => text.replace(/[\r\n]/g, ' '))
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.tuple(line, fc.constantFrom('\n', '\r\n')), { maxLength: 8 }),
        fc.array(fc.integer({ min: 1, max: 9 }), { minLength: 1, maxLength: 20 }),
        async (given, cuts) => {
          const bytes = Buffer.from(given.map(([text, end]) => text + end).join(''))
          const chunks: Buffer[] = []
          for (let from = 0, index = 0; from < bytes.length; index++) {
            const end = from + (cuts[index % cuts.length] ?? 1)
            chunks.push(bytes.subarray(from, end))
            from = end
          }
          expect(await read(chunks)).toEqual(given.map(([text]) => ({ text })))
        },
      ),
    )
  })

  it('end with or without an end of line', async () => {
    expect(await read([Buffer.from('a\nb')])).toEqual([{ text: 'a' }, { text: 'b' }])
    expect(await read([Buffer.from('a\r\n\r\n')])).toEqual([{ text: 'a' }, { text: '' }])
    expect(await read([])).toEqual([])
  })

  it('that are too long are marked and skipped, and the next is read', async () => {
    expect(await read([Buffer.from('1234567'), Buffer.from('890\nok\n')], 5)).toEqual([
      { tooLong: true },
      { text: 'ok' },
    ])
  })

  it('of one chunk come at once, before the next chunk is asked for', async () => {
    const asked: string[] = []
    async function* slow() {
      asked.push('first')
      yield Buffer.from('a\nb\nhalf')
      asked.push('second')
      yield Buffer.from(' a line\n')
    }
    const lines = linesOf(slow())
    expect((await lines.next()).value).toEqual([{ text: 'a' }, { text: 'b' }])
    expect(asked).toEqual(['first'])
    expect((await lines.next()).value).toEqual([{ text: 'half a line' }])
  })
})
