import pg from 'pg'
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

/** One migrated template database a run; every test file gets a copy of it. */
export default async function globalDatabase(project: TestProject) {
  const cluster = await testCluster()
  const template = `test_template_${process.pid}_${project.name}`
  const { ownerUrl } = await ensureDatabase(cluster.setupUrl, template)
  await migrateDatabase(ownerUrl)
  project.provide('setupUrl', cluster.setupUrl('{}'))
  project.provide('templateDatabase', template)
  return async () => {
    const admin = new pg.Client({ connectionString: cluster.setupUrl('postgres') })
    await admin.connect()
    await admin.query(`drop database if exists ${template} with (force)`)
    await admin.end()
    await cluster.stop()
  }
}
