/** `npm run db:generate -- --name x` writes the next migration; it needs no database. */
import { defineConfig } from 'drizzle-kit'

export default defineConfig({ dialect: 'postgresql', schema: './server/db/schema/index.ts', out: './drizzle' })
