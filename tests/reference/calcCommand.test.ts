import { spawn } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { demoTrackModels } from '../../server/db/seed/trackModels'
import releaseExamples from './fixtures/calc-release.json'
import trackExamples from './fixtures/calc-track.json'

const root = fileURLToPath(new URL('../..', import.meta.url))
const models: Record<string, unknown> = demoTrackModels

/** Runs the command as a person would, by npm. */
async function calc(kind: string[], input: string) {
  const child = spawn('npm', ['run', '--silent', 'calc', '--', ...kind], { cwd: root })
  const parts = { out: '', err: '' }
  child.stdout.setEncoding('utf8').on('data', (text: string) => (parts.out += text))
  child.stderr.setEncoding('utf8').on('data', (text: string) => (parts.err += text))
  // an unknown kind ends without reading: its closed input is no failure of the test
  child.stdin.on('error', () => undefined)
  child.stdin.end(input)
  const status = await new Promise<number | null>((resolve) => child.on('close', resolve))
  const answers = parts.out
    .split('\n')
    .filter(Boolean)
    .map((line): unknown => JSON.parse(line))
  return { ...parts, status, answers }
}

const withoutSteps = (answer: unknown) => {
  const { steps: _steps, ...rest } = answer as Record<string, unknown>
  return rest
}

describe('npm run calc', { timeout: 30_000 }, () => {
  // computed with an independent program, see the fixtures
  it('gives the worked answers for release, in order', async () => {
    const { answers, status, err } = await calc(
      ['release'],
      releaseExamples.lines.map((line) => JSON.stringify(line.in)).join('\n'),
    )
    expect(answers.map(withoutSteps)).toEqual(releaseExamples.lines.map((line) => line.out))
    expect({ status, err }).toEqual({ status: 0, err: '' })
  })

  it('gives the worked answers for track, in order, lines ended by CRLF', async () => {
    const lines = trackExamples.lines.map((line) =>
      JSON.stringify({ ...line.in, model: models[line.in.model] }),
    )
    const { answers, status } = await calc(['track'], lines.join('\r\n') + '\r\n')
    expect(answers).toEqual(trackExamples.lines.map((line) => line.out))
    expect(status).toBe(0)
  })

  it('answers what is not well formed and reads on, and gives an empty line no answer', async () => {
    const good = { ...releaseExamples.lines[0]?.in }
    const lines = [
      JSON.stringify(good),
      '',
      'no json',
      '[]',
      'null',
      JSON.stringify({ ...good, boots: 1 }),
      JSON.stringify({ ...good, request: null }),
      JSON.stringify({ ...good, age: undefined }),
      JSON.stringify({ ...good, age: 40.5 }),
      JSON.stringify({ ...good, mass: { value: 70, unit: 'stone' } }),
      JSON.stringify({ ...good, mass: { value: 70, unit: 'kg', pounds: 0 } }),
      JSON.stringify({ ...good, mass: { stone: 48, pounds: 0, unit: 'st-lb' } }),
      JSON.stringify({ ...good, height: { feet: 5, inches: 12, unit: 'ft-in' } }),
      JSON.stringify({ ...good, soleLengthMm: 149.9 }),
      JSON.stringify(good).replace('40', '1e999'),
      JSON.stringify(good).replace('{', '{"__proto__":{},'),
      JSON.stringify(good).replace('305', '305.0'),
    ]
    const { answers, status } = await calc(['release'], lines.join('\n'))
    const invalid = (...path: string[]) => ({
      ok: false,
      reason: 'invalid_input',
      path,
      message: expect.any(String) as unknown,
    })
    expect(answers.map(withoutSteps)).toEqual([
      releaseExamples.lines[0]?.out,
      invalid(),
      invalid(),
      invalid(),
      invalid('boots'),
      invalid('request'),
      invalid('age'),
      invalid('age'),
      invalid('mass', 'unit'),
      invalid('mass', 'pounds'),
      invalid('mass'),
      invalid('height', 'inches'),
      invalid('soleLengthMm'),
      invalid('age'),
      invalid('__proto__'),
      releaseExamples.lines[0]?.out,
    ])
    expect(answers[8]).toMatchObject({ message: "expected 'kg' | 'lb' | 'st-lb'" })
    expect(status).toBe(0)
  })

  it('names an unknown kind on standard error and ends with status 2', async () => {
    for (const kind of [['skis'], ['toString'], []]) {
      const { status, out, err } = await calc(kind, '{}\n')
      expect({ status, out }).toEqual({ status: 2, out: '' })
      expect(err).toContain('give release or track')
    }
  })
})
