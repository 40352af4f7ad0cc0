import type { TestProject } from 'vitest/node'
import { migrateDatabase } from '../../server/db/migrate'
import { ensureDatabase } from '../../server/postgres/roles'
import { testCluster } from './cluster'

declare module 'vitest' {
  interface ProvidedContext {
    /** The set-up role's address of a database; `{}` stands for its name. */
    setupUrl: string
    templateDatabase: string
  }
}

const template = 'test_template'

/** A database server for one run, and one migrated database that every test file gets a copy of. */
export default async function globalDatabase(project: TestProject) {
  const cluster = await testCluster()
  const { ownerUrl } = await ensureDatabase(cluster.setupUrl, template)
  await migrateDatabase(ownerUrl)
  project.provide('setupUrl', cluster.setupUrl('{}'))
  project.provide('templateDatabase', template)
  return () => cluster.stop()
}
