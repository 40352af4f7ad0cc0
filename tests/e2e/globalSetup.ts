import { buildClientIfStale } from '../../server/bin/clientBuild'
import { testCluster } from '../support/cluster'

/** The client as a shop gets it, and a database server for the stories. */
export default async function globalSetup() {
  await buildClientIfStale()
  const cluster = await testCluster()
  process.env.TEST_SETUP_URL = cluster.setupUrl('{}')
  return () => cluster.stop()
}
