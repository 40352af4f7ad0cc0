import { execFileSync, spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'

const debianRoot = '/usr/lib/postgresql'

export const isRoot = process.getuid?.() === 0

/** The folder of PostgreSQL's server programs: of this major version, or the newest; undefined where there is none. */
export function findPrograms(major?: string): string | undefined {
  const versions = fs.existsSync(debianRoot) ? fs.readdirSync(debianRoot) : []
  const [newest] = versions
    .filter((version) => /^\d+$/.test(version) && (!major || version === major))
    .filter((version) => fs.existsSync(path.join(debianRoot, version, 'bin', 'initdb')))
    .sort((a, b) => Number(b) - Number(a))
  if (newest) return path.join(debianRoot, newest, 'bin')
  const found = spawnSync('pg_config', ['--bindir'], { encoding: 'utf8' })
  const dir = found.status === 0 ? found.stdout.trim() : ''
  if (!dir || !fs.existsSync(path.join(dir, 'initdb'))) return undefined
  return major && programsMajor(dir) !== major ? undefined : dir
}

/** The major version that these programs are of. */
export function programsMajor(dir: string): string {
  const said = spawnSync(path.join(dir, 'postgres'), ['--version'], { encoding: 'utf8' }).stdout
  return /\b(\d+)\./.exec(said)?.[1] ?? ''
}

/** Installs Debian's server as root, without the cluster that the package would start by itself on 5432. */
export function installPrograms(say: (line: string) => void): string {
  const wanted = 'apt-get install -y postgresql'
  if (!isRoot) {
    throw new Error(`PostgreSQL's server programs are not on this machine. As root, type: ${wanted}`)
  }
  if (spawnSync('apt-get', ['--version']).status !== 0) {
    throw new Error(
      "PostgreSQL's server programs are not on this machine, and neither is apt-get. Install PostgreSQL 15 or newer.",
    )
  }
  say('Installing PostgreSQL (once) ...')
  const config = '/etc/postgresql-common/createcluster.d'
  fs.mkdirSync(config, { recursive: true })
  fs.writeFileSync(path.join(config, '00-no-main-cluster.conf'), 'create_main_cluster = false\n')
  aptInstall(['postgresql'])
  const programs = findPrograms()
  if (!programs) throw new Error(`PostgreSQL's server programs were not found after: ${wanted}`)
  return programs
}

/** Installs Debian packages as root. */
export function aptInstall(packages: string[]) {
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  const run = (args: string[]) =>
    execFileSync('apt-get', args, { stdio: ['ignore', 'ignore', 'inherit'], env })
  run(['update', '-qq'])
  run(['install', '-y', '-qq', '--no-install-recommends', ...packages])
}
