import path from 'node:path'
import { startCluster, type Cluster } from '../../server/postgres/cluster'

const dataDir = path.resolve(new URL('../..', import.meta.url).pathname, '.data/test/postgres')

/** The private PostgreSQL of the tests: without fsync, apart from every shop's data. */
export const testCluster = (): Promise<Cluster> => startCluster(dataDir, { fast: true, say: console.log })
