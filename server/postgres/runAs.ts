import { spawnSync } from 'node:child_process'
import path from 'node:path'
import { isRoot } from './programs'

const drop = ['--reuid=postgres', '--regid=postgres', '--init-groups']

/**
 * The command words that stand before a PostgreSQL program: root becomes the user postgres (the server refuses
 * root), and with `endWithUs` the kernel stops the server when this process dies, kill -9 included. Where the data
 * folder lies under a folder that only root may enter, the server gets the one capability to pass through.
 */
export function runAs(dataDir: string, { endWithUs = false } = {}): string[] {
  const watch = endWithUs ? ['--pdeathsig', 'INT'] : []
  if (!isRoot) return endWithUs ? ['setpriv', ...watch, '--'] : []
  const reach = spawnSync('setpriv', [...drop, '--', 'test', '-x', path.dirname(dataDir)]).status === 0
  const pass = reach ? [] : ['--inh-caps=+dac_read_search', '--ambient-caps=+dac_read_search']
  return ['setpriv', ...watch, ...drop, ...pass, '--']
}

/** Runs a short program to its end; throws with what it printed. */
export function runToEnd(command: string[]) {
  const done = spawnSync(command[0]!, command.slice(1), { encoding: 'utf8', cwd: '/' })
  if (done.error) throw done.error
  if (done.status !== 0) throw new Error(`${command.join(' ')}\n${done.stdout}${done.stderr}`)
}
