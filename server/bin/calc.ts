/**
 * `npm run --silent calc -- KIND`: one JSON object a line in, one answer a line out, in the same order, computed by
 * the functions that the browser and the server call. Empty lines get no answer; a line that is not well formed
 * gets `invalid_input` and the next one is still read. Exit status 0, 2 for an unknown kind, 1 when reading or
 * writing failed.
 */
import { fstatSync } from 'node:fs'
import { pipeline } from 'node:stream/promises'
import { answerLine, calcAnswers, type CalcAnswer } from '#shared/calc/answers'
import { invalidInput } from '#shared/calc/invalidInput'
import { linesOf, longestLine, type Line } from './lines'

type Answer = (input: unknown) => CalcAnswer

function answerText(answer: Answer, line: Line): string {
  if ('tooLong' in line)
    return `${JSON.stringify(invalidInput([], `expected at most ${longestLine} characters`))}\n`
  return line.text === '' ? '' : `${JSON.stringify(answerLine(answer, line.text))}\n`
}

async function* answers(answer: Answer, input: AsyncIterable<Buffer>): AsyncGenerator<string> {
  for await (const lines of linesOf(input)) {
    const text = lines.map((line) => answerText(answer, line)).join('')
    if (text) yield text
  }
}

/** Answers every line of standard input; resolves with the exit status. */
async function calc(kind: string | undefined): Promise<number> {
  const answer = kind !== undefined && Object.hasOwn(calcAnswers, kind) ? calcAnswers[kind] : undefined
  if (!answer) {
    const known = Object.keys(calcAnswers).join(' or ')
    process.stderr.write(
      `calc: ${kind === undefined ? 'no kind given' : `no calculation is called ${kind}`}; give ${known}\n`,
    )
    return 2
  }
  try {
    // Node would read a directory as an empty input
    if (fstatSync(process.stdin.fd).isDirectory()) throw new Error('standard input is a directory')
    await pipeline(process.stdin, (input: AsyncIterable<Buffer>) => answers(answer, input), process.stdout, {
      end: false,
    })
    return 0
  } catch (error) {
    process.stderr.write(
      `calc: reading or writing stopped: ${error instanceof Error ? error.message : String(error)}\n`,
    )
    return 1
  }
}

process.exitCode = await calc(process.argv[2])
