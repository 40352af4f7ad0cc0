import fs from 'node:fs'
import path from 'node:path'
import { readConfig } from '../config'
import { startCluster, type Cluster } from '../postgres/cluster'
import { ensureDatabase, type Database } from '../postgres/roles'

/** The private cluster for one command: a running one is used and left running, another is started and stopped. */
export async function withCluster<T>(work: (cluster: Cluster) => Promise<T>): Promise<T> {
  const { dataDir } = readConfig(process.env, [])
  fs.mkdirSync(dataDir, { recursive: true })
  const cluster = await startCluster(path.join(dataDir, 'postgres'), { say: console.log })
  try {
    return await work(cluster)
  } finally {
    await cluster.stop()
  }
}

/** The same, with the demo database, or the real shop's for `--real`. */
export function withDatabase<T>(
  args: readonly string[],
  work: (database: Database) => Promise<T>,
): Promise<T> {
  const name = readConfig(process.env, args).demo ? 'notchwise_demo' : 'notchwise_shop'
  return withCluster(async (cluster) => work(await ensureDatabase(cluster.setupUrl, name)))
}
