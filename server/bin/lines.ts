import { StringDecoder } from 'node:string_decoder'

/** A line of input, or a mark for one that is longer than is kept in memory. */
export type Line = { text: string } | { tooLong: true }

/** Longest line that is read, in characters; the rest of a longer one is skipped. */
export const longestLine = 32 * 1024 * 1024

/**
 * Lines of a byte stream, ended by LF or CRLF, the last one with or without: all that a chunk completes at once,
 * so that whoever waits for an answer before sending on gets it. Holds one chunk and one unfinished line; the
 * reader sets the pace.
 */
export async function* linesOf(chunks: AsyncIterable<Buffer>, longest = longestLine): AsyncGenerator<Line[]> {
  const decoder = new StringDecoder('utf8')
  let pieces: string[] = []
  let length = 0
  const add = (piece: string) => {
    length += piece.length
    if (length <= longest) pieces.push(piece)
    else pieces = []
  }
  const finish = (): Line => {
    const line: Line = length > longest ? { tooLong: true } : { text: pieces.join('').replace(/\r$/, '') }
    pieces = []
    length = 0
    return line
  }
  for await (const chunk of chunks) {
    const lines: Line[] = []
    const text = decoder.write(chunk)
    let from = 0
    for (let end = text.indexOf('\n'); end >= 0; end = text.indexOf('\n', from)) {
      add(text.slice(from, end))
      lines.push(finish())
      from = end + 1
    }
    add(text.slice(from))
    if (lines.length > 0) yield lines
  }
  add(decoder.end())
  if (length > 0) yield [finish()]
}
