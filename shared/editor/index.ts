export * from './ids'
export * from './place'
export * from './state'
export * from './transaction'
