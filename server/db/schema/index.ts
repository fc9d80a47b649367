export * from './people.ts'
export * from './batches.ts'
export * from './kit.ts'
export * from './notices.ts'
