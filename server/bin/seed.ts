import { migrateDatabase } from '../db/migrate'
import { seedDemo } from '../db/seed/seedDemo'
import { ensureDatabase } from '../postgres/roles'
import { command } from './command'
import { withCluster } from './database'

// The demo shop only: a shop of one's own begins empty.
await command(async () => {
  await withCluster([], async (cluster) => {
    const { ownerUrl } = await ensureDatabase(cluster.setupUrl, 'notchwise_demo')
    await migrateDatabase(ownerUrl)
    await seedDemo({ ownerUrl, today: new Date() })
  })
  console.log('The demo shop is there.')
})
