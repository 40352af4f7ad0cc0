import pg from 'pg'
import { buildClientIfStale } from '../../server/bin/clientBuild'
import { migrateDatabase } from '../../server/db/migrate'
import { seedDemo } from '../../server/db/seed/seedDemo'
import { ensureDatabase } from '../../server/postgres/roles'
import { testCluster } from '../support/cluster'

export const template = 'test_e2e_template'

/** The client as a shop gets it, and the demo shop as a template that every story gets a copy of. */
export default async function globalSetup() {
  await buildClientIfStale()
  const cluster = await testCluster()
  const admin = new pg.Client({ connectionString: cluster.setupUrl('postgres') })
  await admin.connect()
  await admin.query(`drop database if exists ${template} with (force)`)
  const { ownerUrl } = await ensureDatabase(cluster.setupUrl, template)
  await migrateDatabase(ownerUrl)
  await seedDemo({ ownerUrl, today: new Date() })
  process.env.TEST_SETUP_URL = cluster.setupUrl('{}')
  // The stories' servers run in the test runner, on a cluster that keeps nothing.
  process.env.NODE_ENV = 'test'
  return async () => {
    await admin.query(`drop database if exists ${template} with (force)`)
    await admin.end()
    await cluster.stop()
  }
}
