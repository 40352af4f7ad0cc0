import { execFileSync } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { isRoot } from './programs'
import { runAs, runToEnd } from './runAs'

/** The superuser of a private cluster: for set-up only, the server never uses it. */
export const superuser = 'notchwise_setup'

/**
 * A new cluster with a random password for its superuser. initdb works beside the data folder, which gets its name
 * by a rename: a half-made cluster is never taken for a whole one, and of several starters one wins.
 */
export function makeCluster(dataDir: string, programs: string, { fast }: { fast: boolean }) {
  sweepLeftovers(dataDir)
  const fresh = `${dataDir}.new-${process.pid}`
  const passwordFile = `${fresh}.password`
  fs.mkdirSync(fresh, { mode: 0o700 })
  fs.writeFileSync(passwordFile, `${randomBytes(18).toString('base64url')}\n`, { mode: 0o600 })
  if (isRoot) execFileSync('chown', ['postgres:postgres', fresh, passwordFile])
  try {
    runToEnd([
      ...runAs(dataDir),
      path.join(programs, 'initdb'),
      ...['-D', fresh, '-U', superuser, '-E', 'UTF8', '--locale=C.UTF-8', '--auth=scram-sha-256'],
      ...[`--pwfile=${passwordFile}`, '--no-instructions', ...(fast ? ['--no-sync'] : [])],
    ])
    fs.renameSync(passwordFile, path.join(fresh, 'setup.password'))
    fs.renameSync(fresh, dataDir)
  } catch (error) {
    fs.rmSync(fresh, { recursive: true, force: true })
    // Another starter may have been faster; its cluster is as good.
    if (!isCluster(dataDir)) throw error
  } finally {
    fs.rmSync(passwordFile, { force: true })
  }
}

export const isCluster = (dataDir: string) => fs.existsSync(path.join(dataDir, 'PG_VERSION'))

export const superuserPassword = (dataDir: string) =>
  fs.readFileSync(path.join(dataDir, 'setup.password'), 'utf8').trim()

/** What a starter left that was killed in the middle of initdb. */
function sweepLeftovers(dataDir: string) {
  const folder = path.dirname(dataDir)
  const prefix = `${path.basename(dataDir)}.new-`
  for (const name of fs.readdirSync(folder).filter((each) => each.startsWith(prefix))) {
    const pid = /\d+/.exec(name.slice(prefix.length))?.[0]
    if (!fs.existsSync(`/proc/${pid}`)) fs.rmSync(path.join(folder, name), { recursive: true, force: true })
  }
}
