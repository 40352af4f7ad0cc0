import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'

const debianRoot = '/usr/lib/postgresql'
const oldestMajor = 15

export const isRoot = process.getuid?.() === 0

/** The folder of PostgreSQL's server programs: of this major version, or the newest; undefined where there is none. */
export function findPrograms(major?: string): string | undefined {
  const fits = (version: string) => (major ? version === major : Number(version) >= oldestMajor)
  const versions = fs.existsSync(debianRoot) ? fs.readdirSync(debianRoot) : []
  const [newest] = versions
    .filter((version) => /^\d+$/.test(version) && fits(version))
    .filter((version) => fs.existsSync(path.join(debianRoot, version, 'bin', 'initdb')))
    .sort((a, b) => Number(b) - Number(a))
  if (newest) return path.join(debianRoot, newest, 'bin')
  const found = spawnSync('pg_config', ['--bindir'], { encoding: 'utf8' })
  const dir = found.status === 0 ? found.stdout.trim() : ''
  if (!dir || !fs.existsSync(path.join(dir, 'initdb'))) return undefined
  return fits(programsMajor(dir)) ? dir : undefined
}

/** The major version that these programs are of. */
export function programsMajor(dir: string): string {
  const said = spawnSync(path.join(dir, 'postgres'), ['--version'], { encoding: 'utf8' }).stdout ?? ''
  return /\b(\d+)\./.exec(said)?.[1] ?? ''
}

/** Installs Debian's server as root, without the cluster that the package would start by itself on 5432. */
export function installPrograms(say: (line: string) => void): string {
  const missing = `The server programs of PostgreSQL ${oldestMajor} or newer are not on this machine.`
  const wanted = 'apt-get install -y postgresql'
  if (!isRoot) throw new Error(`${missing} As root, type: ${wanted}`)
  say('Installing PostgreSQL (once) ...')
  const config = '/etc/postgresql-common/createcluster.d'
  fs.mkdirSync(config, { recursive: true })
  fs.writeFileSync(path.join(config, '00-no-main-cluster.conf'), 'create_main_cluster = false\n')
  aptInstall(['postgresql'])
  const programs = findPrograms()
  if (!programs) throw new Error(`${missing} They were looked for after: ${wanted}`)
  return programs
}

/** Installs Debian packages as root; throws with what to do where that does not work. */
export function aptInstall(packages: string[]) {
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  const install = ['install', '-y', '-qq', '--no-install-recommends', ...packages]
  for (const args of [['update', '-qq'], install]) {
    const { status, error } = spawnSync('apt-get', args, { stdio: ['ignore', 'ignore', 'inherit'], env })
    if (error) throw new Error(`There is no apt-get on this machine. Install by hand: ${packages.join(' ')}`)
    if (status !== 0) {
      throw new Error(
        `apt-get could not install ${packages.join(' ')}; its reason stands above. When that is mended, start again.`,
      )
    }
  }
}
