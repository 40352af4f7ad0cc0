import { setTimeout as pause } from 'node:timers/promises'
import { startCluster, type Cluster } from './cluster'

const firstWaitMs = 250
const longestWaitMs = 10_000
/** After running this long a server counts as well, and the next wait is short again. */
const steadyMs = 60_000

/**
 * Brings a PostgreSQL that ended by itself back on the same port, waiting longer each time, until `stop` ends the
 * one that runs then.
 */
export function keepCluster(dataDir: string, first: Cluster, say: (line: string) => void) {
  const ending = new AbortController()
  const toldToEnd = new Promise<void>((done) =>
    ending.signal.addEventListener('abort', () => done(), { once: true }),
  )
  const last = watch()
  return {
    stop: async () => {
      ending.abort()
      await (await last).stop()
    },
  }

  async function watch(): Promise<Cluster> {
    let cluster = first
    for (let waitMs = firstWaitMs; ; waitMs = Math.min(waitMs * 2, longestWaitMs)) {
      const since = Date.now()
      await Promise.race([cluster.ended, toldToEnd])
      if (ending.signal.aborted) return cluster
      if (Date.now() - since > steadyMs) waitMs = firstWaitMs
      say(`PostgreSQL ended by itself. It is started again in ${waitMs} ms.`)
      await Promise.race([pause(waitMs), toldToEnd])
      cluster = await again(cluster)
    }
  }

  async function again(cluster: Cluster): Promise<Cluster> {
    try {
      return await startCluster(dataDir, { port: cluster.port, signal: ending.signal })
    } catch (error) {
      if (!ending.signal.aborted) say(error instanceof Error ? error.message : String(error))
      return { ...cluster, ended: Promise.resolve() }
    }
  }
}
