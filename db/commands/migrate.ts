import { migrateDatabase } from './migrate-database'

const url = process.env.DATABASE_OWNER_URL
if (!url) {
  console.error('DATABASE_OWNER_URL is not set. Give the address of the database with its owner login.')
  process.exit(1)
}
const ran = await migrateDatabase(url)
console.log(ran.length > 0 ? `Ran ${ran.join(', ')}.` : 'The database is up to date.')
