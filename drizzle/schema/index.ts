// Every table, for queries and for migrations.
export * from './audit.ts'
export * from './person.ts'
export * from './project.ts'
export * from './run.ts'
export * from './study.ts'
