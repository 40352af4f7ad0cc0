import { spawn } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { fileURLToPath } from 'node:url'
import { aptInstall, findPrograms, installPrograms, isRoot } from '../server/postgres/programs'

const root = fileURLToPath(new URL('..', import.meta.url))
const reports = path.join(root, '.cache/reports')
const bin = (name: string) => path.join(root, 'node_modules/.bin', name)

interface Count {
  passed: number
  failed: number
}

interface Suite {
  name: string
  run: () => Promise<Count>
}

const vitestProjects = ['unit', 'client', 'reference', 'api', 'sockets', 'faults']
const suites: Suite[] = [
  { name: 'lint', run: () => check('npm', ['run', '--silent', 'lint']) },
  { name: 'format', run: () => check(bin('prettier'), ['--check', '--log-level', 'warn', '.']) },
  { name: 'typecheck', run: () => check(bin('vue-tsc'), ['--build']) },
  ...vitestProjects.map((name) => ({ name, run: () => vitest(name) })),
  { name: 'e2e', run: playwright },
]

/** Everything that the tests need on this machine; installed as root, otherwise said in words. */
function prepare(wanted: string[]) {
  const needsPostgres = ['api', 'sockets', 'faults', 'e2e'].some((name) => wanted.includes(name))
  if (needsPostgres && !findPrograms()) installPrograms(console.log)
  if (!wanted.includes('e2e') || fs.existsSync('/usr/bin/chromium')) return
  if (!isRoot) throw new Error('The browser tests need Chromium. As root, type: apt-get install -y chromium')
  console.log('Installing Chromium (once) ...')
  aptInstall(['chromium'])
}

/** A check that either holds or not counts as one test. */
async function check(command: string, args: string[]): Promise<Count> {
  const code = await runToEnd(command, args)
  return code === 0 ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 }
}

async function vitest(project: string): Promise<Count> {
  const report = path.join(reports, `${project}.json`)
  fs.rmSync(report, { force: true })
  await runToEnd(bin('vitest'), [
    ...['run', '--config', 'tests/vitest.config.ts', '--project', project],
    ...['--reporter', 'default', '--reporter', 'json', '--outputFile.json', report],
  ])
  if (!fs.existsSync(report)) return { passed: 0, failed: 1 }
  const told = JSON.parse(fs.readFileSync(report, 'utf8')) as {
    numPassedTests: number
    numTotalTests: number
    success: boolean
    numFailedTestSuites: number
  }
  // A skipped test counts as failed, and so does a file that could not be read.
  const failed = told.numTotalTests - told.numPassedTests
  return {
    passed: told.numPassedTests,
    failed: failed === 0 && !told.success ? told.numFailedTestSuites || 1 : failed,
  }
}

async function playwright(): Promise<Count> {
  const report = path.join(reports, 'e2e.json')
  fs.rmSync(report, { force: true })
  await runToEnd(bin('playwright'), ['test', '--config', 'tests/e2e/playwright.config.ts'], {
    PLAYWRIGHT_JSON_OUTPUT_NAME: report,
  })
  if (!fs.existsSync(report)) return { passed: 0, failed: 1 }
  const { stats, errors } = JSON.parse(fs.readFileSync(report, 'utf8')) as {
    stats: { expected: number; unexpected: number; flaky: number; skipped: number }
    errors: unknown[]
  }
  return { passed: stats.expected, failed: stats.unexpected + stats.flaky + stats.skipped + errors.length }
}

function runToEnd(command: string, args: string[], env: Record<string, string> = {}): Promise<number> {
  return new Promise((done) => {
    const child = spawn(command, args, { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } })
    child.once('error', () => done(1))
    child.once('exit', (code) => done(code ?? 1))
  })
}

async function main() {
  const wanted = process.argv.slice(2)
  const names = wanted.length > 0 ? wanted : suites.map(({ name }) => name)
  const unknown = names.filter((name) => !suites.some((suite) => suite.name === name))
  if (unknown.length > 0)
    throw new Error(
      `No such suite: ${unknown.join(', ')}. There are: ${suites.map((s) => s.name).join(', ')}`,
    )
  prepare(names)
  fs.mkdirSync(reports, { recursive: true })
  const total = { passed: 0, failed: 0 }
  for (const { name, run } of suites.filter((suite) => names.includes(suite.name))) {
    const started = Date.now()
    const { passed, failed } = await run()
    console.log(
      `${name}: ${passed} passed, ${failed} failed (${((Date.now() - started) / 1000).toFixed(0)} s)\n`,
    )
    total.passed += passed
    total.failed += failed
  }
  console.log(`${total.passed} passed, ${total.failed} failed`)
  return total.failed === 0 ? 0 : 1
}

main().then(
  (code) => process.exit(code),
  (error: unknown) => {
    console.error(error instanceof Error ? error.message : error)
    console.log('0 passed, 1 failed')
    process.exit(1)
  },
)
