import { defineConfig } from 'drizzle-kit'

export default defineConfig({ dialect: 'postgresql', schema: './server/database/schema/*.ts', out: './drizzle', entities: { roles: false } })
