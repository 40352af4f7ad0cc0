import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { fileURLToPath } from 'node:url'
import { startCluster, type Cluster } from '../../server/postgres/cluster'

const folder = fileURLToPath(new URL('../../.data/test', import.meta.url))

/**
 * A PostgreSQL of its own for one run of tests: without fsync, apart from every shop's data, gone when the run ends.
 * Runs that meet on one machine never share one, so that none ends under another.
 */
export async function testCluster(): Promise<Cluster> {
  sweepKilledRuns()
  const own = path.join(folder, `${process.pid}-${randomBytes(4).toString('hex')}`)
  fs.mkdirSync(own, { recursive: true })
  const cluster = await startCluster(path.join(own, 'postgres'), { fast: true, say: console.log })
  return {
    ...cluster,
    stop: async () => {
      await cluster.stop()
      fs.rmSync(own, { recursive: true, force: true })
    },
  }
}

function sweepKilledRuns() {
  if (!fs.existsSync(folder)) return
  for (const name of fs.readdirSync(folder)) {
    const pid = /^(\d+)-/.exec(name)?.[1]
    if (pid && !fs.existsSync(`/proc/${pid}`))
      fs.rmSync(path.join(folder, name), { recursive: true, force: true })
  }
}
