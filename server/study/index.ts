export { studyLots } from './studyLots.js'
export { StudyTableBuilder } from './tableBuilder.js'
export { STUDY_FAULTS } from './faults.js'
export type { StudyTable } from './table.js'
export type {
  Comparison,
  ComparisonKind,
  Finding,
  LevelLine,
  StudyFactor,
  StudyFault,
  StudyLoss,
  StudyOptions,
  StudyResult,
  StudyRow,
} from './types.js'
