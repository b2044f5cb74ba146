import { FAULT_TREE, faultRule } from '../shared/faults/index.js'
import type { StudyFault } from './types.js'

/** The fault tree with its rules, as studyLots takes it. */
export const STUDY_FAULTS: readonly StudyFault[] = FAULT_TREE.flatMap((node) => {
  const rule = faultRule(node.id)
  return rule ? [{ ...rule, parent: node.parent }] : []
})
