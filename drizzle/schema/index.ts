// Every table, for queries and for migrations.
export * from './analysis.ts'
export * from './audit.ts'
export * from './message.ts'
export * from './person.ts'
export * from './project.ts'
export * from './review.ts'
export * from './run.ts'
export * from './study.ts'
