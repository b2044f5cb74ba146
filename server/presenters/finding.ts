import type { FindingDetail, FindingView, StudyView } from '../contract/findings.js'
import type { FindingWithStudy } from '../queries/finding.js'
import type { FindingRow, StudyRow } from '../queries/findings.js'
import { faultRule } from '../shared/faults/index.js'
import { FIRING_KINDS } from '../shared/kinds.js'
import { cautionsFor, checksFor } from './findingFacts.js'

export function presentStudy(study: StudyRow): StudyView {
  return {
    uid: study.uid,
    studio: study.studio,
    windowFrom: study.windowFrom,
    windowTo: study.windowTo,
    firings: study.firings,
    lots: study.lots,
    pieces: study.pieces,
    comparisons: study.comparisons,
    findings: study.findings,
    finishedAt: study.finishedAt.toISOString(),
  }
}

export function presentFinding(finding: FindingRow): FindingView {
  return {
    uid: finding.uid,
    studio: finding.studio,
    fault: finding.fault,
    factor: finding.factor,
    level: finding.level,
    pair: finding.pair,
    comparison: finding.comparison,
    ratio: finding.ratio,
    lower: finding.lower,
    upper: finding.upper,
    pValue: finding.pValue,
    qValue: finding.qValue,
    exposed: { events: finding.exposedEvents, units: finding.exposedUnits },
    unexposed: { events: finding.unexposedEvents, units: finding.unexposedUnits },
    mixedStrata: finding.mixedStrata,
    informativeStrata: finding.informativeStrata,
    recordedShare: finding.recordedShare,
    verdict: finding.verdict,
    firstSeenOn: finding.firstSeenOn,
  }
}

export function presentFindingDetail(finding: FindingWithStudy): FindingDetail {
  const factors = finding.pair ? [finding.factor, finding.pair.factor] : [finding.factor]
  return {
    ...presentFinding(finding),
    study: presentStudy(finding.study),
    levels: finding.levels,
    firingFilters: firingFilters(finding),
    checks: checksFor(finding.fault, factors),
    cautions: cautionsFor(finding.fault),
  }
}

/** Filters of the list of firings (contract/firings.ts) that hold the level and the fault, in the study's window. */
function firingFilters({
  study,
  fault,
  factor,
  level,
  pair,
}: FindingWithStudy): Record<string, string> {
  const kinds = faultRule(fault)?.seenIn ?? FIRING_KINDS
  return {
    status: 'reported',
    from: study.windowFrom,
    to: study.windowTo,
    fault,
    ...(kinds.length < FIRING_KINDS.length && { kind: kinds.join(',') }),
    ...(study.studio && { studio: study.studio.uid }),
    ...(factor === 'kiln'
      ? { kiln: level.uid }
      : { level: [level, ...(pair ? [pair.level] : [])].map(({ uid }) => uid).join(',') }),
  }
}
