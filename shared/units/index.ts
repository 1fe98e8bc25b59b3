export * from './quantities.ts'
export * from './parse.ts'
export * from './format.ts'
