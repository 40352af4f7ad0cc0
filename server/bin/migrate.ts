import { migrateDatabase } from '../db/migrate'
import { command } from './command'
import { withDatabase } from './database'

await command(async () => {
  await withDatabase(process.argv.slice(2), ({ ownerUrl }) => migrateDatabase(ownerUrl))
  console.log('The database is up to date.')
})
