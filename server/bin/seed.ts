import { migrateDatabase } from '../db/migrate'
import { seedDemo } from '../db/seed/seedDemo'
import { withDatabase } from './database'

await withDatabase([], async ({ ownerUrl }) => {
  await migrateDatabase(ownerUrl)
  await seedDemo({ ownerUrl, today: new Date() })
})
console.log('The demo shop is there.')
