import { readdir, readFile } from 'node:fs/promises'
import pg from 'pg'
import type { TestProject } from 'vitest/node'

declare module 'vitest' {
  interface ProvidedContext {
    databaseServer: string
    templateDatabase: string
  }
}

/** One migrated template database a run; every test file gets a copy of it. */
export default async function globalDatabase(project: TestProject) {
  const server = process.env.TEST_DATABASE_SERVER ?? 'postgres://postgres@127.0.0.1:55432'
  const template = `test_template_${process.pid}_${Date.now()}`
  const admin = new pg.Client({ connectionString: `${server}/postgres` })
  await admin.connect()
  await admin.query(`create database ${template} owner notchwise_owner`)
  const owner = new pg.Client({ connectionString: `${server.replace('postgres@', 'notchwise_owner@')}/${template}` })
  await owner.connect()
  const folder = new URL('../../drizzle/', import.meta.url)
  for (const file of (await readdir(folder)).filter((name) => name.endsWith('.sql')).sort()) {
    await owner.query(await readFile(new URL(file, folder), 'utf8'))
  }
  await owner.end()
  project.provide('databaseServer', server)
  project.provide('templateDatabase', template)
  return async () => {
    await admin.query(`drop database if exists ${template} with (force)`)
    await admin.end()
  }
}
