// Settings of drizzle-kit, which writes migrations from the schema; applying them is drizzle-orm's migrator's task.
import { defineConfig } from 'drizzle-kit'

export default defineConfig({
  dialect: 'postgresql',
  schema: './drizzle/schema/index.ts',
  out: './drizzle/migrations',
})
