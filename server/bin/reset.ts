import pg from 'pg'
import { migrateDatabase } from '../db/migrate'
import { seedDemo } from '../db/seed/seedDemo'
import { ensureDatabase } from '../postgres/roles'
import { command } from './command'
import { withCluster } from './database'

// The demo shop only: a real shop's data is never thrown away by a command.
await command(async () => {
  await withCluster([], async (cluster) => {
    const admin = new pg.Client({ connectionString: cluster.setupUrl('postgres') })
    await admin.connect()
    await admin.query('drop database if exists notchwise_demo with (force)').finally(() => admin.end())
    const { ownerUrl } = await ensureDatabase(cluster.setupUrl, 'notchwise_demo')
    await migrateDatabase(ownerUrl)
    await seedDemo({ ownerUrl, today: new Date() })
  })
  console.log('The demo shop is as on its first morning.')
})
