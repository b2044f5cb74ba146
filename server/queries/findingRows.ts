import type { Study } from '../models/index.js'

/** The SQL that lists findings and the shape that it answers: shared by the list and the one. */
export interface NamedRow {
  uid: string
  name: string
}

/** A finding with the names of what it is about; studio null is the whole network. */
export interface FindingRow {
  id: number
  uid: string
  studyId: number
  studio: NamedRow | null
  fault: string
  factor: string
  level: NamedRow
  pair: { factor: string; level: NamedRow } | null
  comparison: 'within-firing' | 'between-firings'
  ratio: number | null
  lower: number | null
  upper: number | null
  pValue: number
  qValue: number
  exposedUnits: number
  exposedEvents: number
  unexposedUnits: number
  unexposedEvents: number
  mixedStrata: number
  informativeStrata: number
  recordedShare: number
  verdict: string | null
  firstSeenOn: string
}

export interface StudyRow {
  id: number
  uid: string
  studio: NamedRow | null
  windowFrom: string
  windowTo: string
  firings: number
  lots: number
  pieces: number
  comparisons: number
  findings: number
  finishedAt: Date
}

export const SELECT = `SELECT f.id, f.uid, f.study_id AS studyId, f.fault, f.factor, f.comparison, f.ratio,
    f.lower_limit AS lower, f.upper_limit AS upper, f.p_value AS pValue, f.q_value AS qValue,
    f.exposed_units AS exposedUnits, f.exposed_events AS exposedEvents,
    f.unexposed_units AS unexposedUnits, f.unexposed_events AS unexposedEvents,
    f.mixed_strata AS mixedStrata, f.informative_strata AS informativeStrata, f.recorded_share AS recordedShare,
    f.verdict, f.first_seen_on AS firstSeenOn, f.pair_factor AS pairFactor,
    COALESCE(k.uid, l.uid) AS levelUid, COALESCE(k.name, l.name) AS levelName,
    p.uid AS pairUid, p.name AS pairName, s.uid AS studioUid, s.name AS studioName`

export const FROM = `FROM findings f
  LEFT JOIN levels l ON l.network_id = f.network_id AND l.id = f.level_id AND f.factor <> 'kiln'
  LEFT JOIN kilns k ON k.network_id = f.network_id AND k.id = f.level_id AND f.factor = 'kiln'
  LEFT JOIN levels p ON p.network_id = f.network_id AND p.id = f.pair_level_id
  LEFT JOIN studios s ON s.network_id = f.network_id AND s.id = f.studio_id`

/** The wall inside the network: of the person's studios, or about what belongs to the network. */
export const VISIBLE = `(f.studio_id IS NULL OR f.studio_id IN (:readable))
  AND (COALESCE(k.studio_id, l.studio_id) IS NULL OR COALESCE(k.studio_id, l.studio_id) IN (:readable))
  AND (p.studio_id IS NULL OR p.studio_id IN (:readable))
  AND COALESCE(k.uid, l.uid) IS NOT NULL`

export interface SelectedRow extends Omit<FindingRow, 'studio' | 'level' | 'pair'> {
  levelUid: string
  levelName: string
  pairFactor: string | null
  pairUid: string | null
  pairName: string | null
  studioUid: string | null
  studioName: string | null
}

/** SQL knows no empty list; no row has id 0. */
export function listOf(ids: readonly number[]): number[] {
  return ids.length > 0 ? [...ids] : [0]
}

/** What the SQL answers, under its names. */
export function findingRow(selected: SelectedRow): FindingRow {
  const { levelUid, levelName, pairFactor, pairUid, pairName, studioUid, studioName, ...row } =
    selected
  return {
    ...row,
    studio: studioUid === null ? null : { uid: studioUid, name: studioName ?? '' },
    level: { uid: levelUid, name: levelName },
    pair:
      pairFactor === null || pairUid === null
        ? null
        : { factor: pairFactor, level: { uid: pairUid, name: pairName ?? '' } },
  }
}

/** A study as presenters take it. */
export function studyRow(study: Study, studio: NamedRow | null): StudyRow {
  const {
    id,
    uid,
    windowFrom,
    windowTo,
    firings,
    lots,
    pieces,
    comparisons,
    findings,
    finishedAt,
  } = study
  return {
    id,
    uid,
    studio: studio && { uid: studio.uid, name: studio.name },
    windowFrom,
    windowTo,
    firings,
    lots,
    pieces,
    comparisons,
    findings,
    finishedAt,
  }
}
