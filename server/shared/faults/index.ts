export * from './tree.js'
export * from './rules.js'
export * from './atRisk.js'
