/** Which faults are offered, in which order: the plain names first, the tree behind them. */
import {
  AT_THE_KILN,
  FAULT_TREE,
  faultNode,
  withAncestors,
} from '../../../server/shared/faults/tree.js'
import type { FaultNode } from '../../../server/shared/faults/tree.js'
import { faultRule } from '../../../server/shared/faults/rules.js'
import type { FailedOutcome } from '../../../server/shared/counts.js'
import { FAILED_OUTCOMES } from '../../../server/shared/counts.js'
import type { FiringKind } from '../../../server/shared/kinds.js'

/** `before`: found at loading, before the firing. */
export type Stage = 'before' | 'after'

/** Can this be seen in such a firing? A bisque has no glaze to fail. */
export function isOffered(id: string, kind: FiringKind, stage: Stage = 'after'): boolean {
  const rule = faultRule(id)
  if (!rule) return false
  return !(kind === 'bisque' && rule.needsGlaze) && (stage === 'after' || rule.seenBeforeFiring)
}

/** The plain names that a phone shows first; faults already met in this report that are not among them come before. */
export function plainNames(kind: FiringKind, met: readonly string[] = []): FaultNode[] {
  const plain = AT_THE_KILN.filter((id) => isOffered(id, kind))
  return [...met.filter((id) => !plain.includes(id)), ...plain].flatMap((id) => faultNode(id) ?? [])
}

/** A node of the tree as a line of the list: how deep it stands, and its family. */
export interface FaultLine {
  node: FaultNode
  depth: number
  family: string
}

/** The tree from the top, families together, coarse nodes before their children. */
export function faultLines(kind: FiringKind, stage: Stage = 'after'): FaultLine[] {
  return FAULT_TREE.filter(({ id }) => isOffered(id, kind, stage)).map((node) => {
    const path = withAncestors(node.id)
    return { node, depth: path.length - 1, family: path.at(-1) ?? node.id }
  })
}

/** What usually becomes of a piece with this fault. */
export function usualOutcome(id: string): FailedOutcome {
  const usual = faultRule(id)?.usualOutcome
  return FAILED_OUTCOMES.find((outcome) => outcome === usual) ?? 'waster'
}
