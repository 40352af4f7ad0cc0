import { withDatabase } from './database'
import { migrateDatabase } from '../db/migrate'

await withDatabase(process.argv.slice(2), ({ ownerUrl }) => migrateDatabase(ownerUrl))
console.log('The database is up to date.')
