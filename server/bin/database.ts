import path from 'node:path'
import { environment, readConfig, type Config } from '../config'
import { startCluster, type Cluster } from '../postgres/cluster'
import { ensureDatabase, type Database } from '../postgres/roles'
import { makeDataDir } from './dataDir'

/** The private cluster for one command: a running one is used and left running, another is started and stopped. */
export async function withCluster<T>(
  args: readonly string[],
  work: (cluster: Cluster, config: Config) => Promise<T>,
): Promise<T> {
  const config = readConfig(environment(), args)
  makeDataDir(config.dataDir)
  const cluster = await startCluster(path.join(config.dataDir, 'postgres'), { say: console.log })
  try {
    return await work(cluster, config)
  } finally {
    await cluster.stop()
  }
}

/** The same, with the demo database, or the real shop's for `--real`. */
export function withDatabase<T>(
  args: readonly string[],
  work: (database: Database) => Promise<T>,
): Promise<T> {
  return withCluster(args, async (cluster, config) =>
    work(await ensureDatabase(cluster.setupUrl, config.database)),
  )
}
