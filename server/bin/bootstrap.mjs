// Plain JavaScript without packages: it runs before there are any.
import { spawn, spawnSync } from 'node:child_process'
import { existsSync, readFileSync, rmSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('../..', import.meta.url))
const [file, ...args] = process.argv.slice(2)

const [major, minor] = process.versions.node.split('.').map(Number)
if (major < 20 || (major === 20 && minor < 19)) {
  console.error(`Notchwise needs Node.js 20.19 or newer; this is ${process.versions.node}.`)
  process.exit(1)
}

if (!packagesAreThere()) {
  console.log('Installing packages (once) ...')
  rmSync(`${root}node_modules/.package-lock.json`, { force: true })
  const npm = spawnSync('npm', ['ci', '--no-progress', '--loglevel=error'], { cwd: root, stdio: 'inherit' })
  if (npm.status !== 0) {
    console.error('The packages could not be installed; npm says why above. Type npm ci to see it again.')
    process.exit(1)
  }
}

const child = spawn(process.execPath, ['--import', 'tsx', file, ...args], { cwd: root, stdio: 'inherit' })
// Ctrl-C reaches the child by itself; what is sent to this process alone is passed on.
for (const signal of ['SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal))
process.on('SIGINT', () => undefined)
child.on('exit', (code, signal) => process.exit(signal ? 1 : (code ?? 1)))

/** npm writes what it installed; every package of the lock file that belongs on this machine must be in it. */
function packagesAreThere() {
  const installed = `${root}node_modules/.package-lock.json`
  if (!existsSync(installed)) return false
  const wanted = JSON.parse(readFileSync(`${root}package-lock.json`, 'utf8')).packages
  const found = JSON.parse(readFileSync(installed, 'utf8')).packages
  return Object.entries(wanted).every(
    ([name, { version, optional }]) =>
      name === '' || (found[name] ? found[name].version === version : optional === true),
  )
}
