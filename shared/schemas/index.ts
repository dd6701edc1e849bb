export * from './account'
export * from './arrangement'
export * from './edit'
export * from './problem'
