export * from './people.ts'
