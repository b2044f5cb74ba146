export * from './tree.js'
export * from './rules.js'
