// Plain JavaScript without packages: it runs before there are any. Also without newer syntax, so that an old Node.js
// reads far enough to say that it is too old.
import { spawn, spawnSync } from 'child_process'
import { existsSync, readFileSync } from 'fs'
import { fileURLToPath } from 'url'

const root = fileURLToPath(new URL('../..', import.meta.url))
const [file, ...args] = process.argv.slice(2)

const [major, minor] = process.versions.node.split('.').map(Number)
if (!((major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22)) {
  console.error(`Notchwise needs Node.js 20.19 or 22.12 or newer; this is ${process.versions.node}.`)
  process.exit(1)
}

if (!packagesAreThere()) {
  // On standard error: what a command answers on standard output may be read by a program.
  console.error('Installing packages (once) ...')
  const npm = spawnSync('npm', ['ci', '--no-progress', '--loglevel=error'], {
    cwd: root,
    stdio: ['ignore', process.stderr, process.stderr],
  })
  if (npm.status !== 0) {
    console.error('The packages could not be installed; npm says why above. Type npm ci to see it again.')
    process.exit(1)
  }
}

// The channel to the child closes when this process dies, kill -9 included: a server never runs on unseen.
const child = spawn(process.execPath, ['--import', 'tsx', file, ...args], {
  cwd: root,
  stdio: ['inherit', 'inherit', 'inherit', 'ipc'],
})
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal))
endWithNpm()
child.on('exit', (code, signal) => process.exit(signal ? 1 : code))

/** Where npm began this and is killed with -9, it tells nobody: its death is seen by the change of parent. */
function endWithNpm() {
  if (!process.env.npm_lifecycle_event) return
  const npm = process.ppid
  setInterval(() => {
    if (process.ppid !== npm) child.kill('SIGTERM')
  }, 1000).unref()
}

/** npm notes what it installed; every package of the lock file that belongs on this machine must be in that note. */
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
