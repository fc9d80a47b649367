export * from './people.ts'
export * from './batches.ts'
