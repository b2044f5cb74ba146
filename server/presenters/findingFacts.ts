import facts from '../shared/faults/facts.json' with { type: 'json' }
import { FAULT_TREE, faultRule, withDescendants } from '../shared/faults/index.js'

/** What to look at and what to beware of, from the facts about faults, each with its source in words. */
export interface SourcedText {
  text: string
  source: string
}

interface Sourced {
  source: string
}

interface FaultFacts {
  id: string
  causes: (Sourced & { cause: string; practice_lever: string; factor: string })[]
  discriminating_tests: (Sourced & { check: string; reading: string })[]
  cautions: (Sourced & { fact: string })[]
}

const FACTS = new Map((facts.faults as FaultFacts[]).map((fault) => [fault.id, fault]))
const SOURCES = facts.sources as Record<string, { citation: string }>

/** The facts' own factors that belong to a factor of the registry; judgement, common practice, no source. */
const FACTS_OF_FACTOR: Readonly<Record<string, readonly string[]>> = {
  form: ['size_class', 'support'],
  clay_body: ['clay_body'],
  clay_condition: ['clay_condition', 'wedging'],
  glaze: ['glaze_recipe', 'glaze_thickness'],
  glaze_sides: ['glaze_sides'],
  forming: ['forming_method', 'base_finish'],
  drying_practice: ['drying_practice'],
  joining_practice: ['joining_practice', 'join_state'],
  glazing_practice: ['glaze_method', 'glaze_thickness', 'bisque_cleaning', 'foot_clearance'],
  thickness_band: ['thickness_band'],
  size_band: ['size_class'],
  rack: ['drying_practice'],
  days_dried: ['days_dried', 'drying_practice'],
  shelf: ['shelf_position', 'kiln_loading', 'shelf_care', 'support'],
  class: ['maker_experience', 'base_finish'],
  class_level: ['maker_experience', 'base_finish'],
  kiln: ['shelf_position', 'witness_cone', 'atmosphere', 'shelf_care'],
  programme: ['bisque_programme', 'glaze_programme', 'bisque_peak', 'witness_cone'],
  cooling: ['cooling_mode'],
  opening_temperature: ['unload_temp', 'cooling_mode'],
}

const MOST_CHECKS = 6
const MOST_NAME_CHECKS = 2

/** "common practice, no source", "from memory of ...", or the publication; several are listed. */
export function sourceInWords(source: string): string {
  const keys = source.split(/,(?![^(]*\))/)
  return keys.map((key) => oneSource(key.trim())).join('; ')
}

function oneSource(text: string): string {
  const [, key = '', note] = /^(\S+)(?: \((.*)\))?$/.exec(text) ?? []
  const bracket = note ? ` (${note})` : ''
  if (key === 'CP') return `common practice, no source${bracket}`
  const citation = SOURCES[key.slice(2)]?.citation ?? key.slice(2)
  return key.startsWith('M:') ? `from memory of ${citation}${bracket}` : `${citation}${bracket}`
}

/** Facts of the fault, or of every fault below a coarser node, in the tree's order. */
function factsOf(fault: string): FaultFacts[] {
  const below = new Set(withDescendants(fault))
  return FAULT_TREE.filter(({ id }) => below.has(id)).flatMap(({ id }) => FACTS.get(id) ?? [])
}

function unique(texts: readonly SourcedText[]): SourcedText[] {
  return [...new Map(texts.map((each) => [each.text, each])).values()]
}

/** What to check on the shelf: the known ways of the factors in question to this fault, then what tells the fault from others. */
export function checksFor(fault: string, factors: readonly string[]): SourcedText[] {
  const asked = new Set(factors.flatMap((factor) => FACTS_OF_FACTOR[factor] ?? []))
  const known = factsOf(fault)
  const ways = known.flatMap(({ causes }) =>
    causes
      .filter(({ factor }) => asked.has(factor))
      .map(({ cause, practice_lever, source }) => ({
        text: `${cause}.${better(practice_lever)}`,
        source: sourceInWords(source),
      })),
  )
  const naming = FACTS.get(fault)?.discriminating_tests.slice(0, MOST_NAME_CHECKS) ?? []
  const names = naming.map(({ check, reading, source }) => ({
    text: `To be sure of the name: ${check.charAt(0).toLowerCase()}${check.slice(1)}; ${reading}.`,
    source: sourceInWords(source),
  }))
  return [...unique(ways).slice(0, MOST_CHECKS), ...names]
}

/** "Drying practice: uncovered -> covered, turned" gives " Better: covered, turned." */
function better(lever: string): string {
  const [, after] = lever.split(' -> ')
  return after ? ` Better: ${after}.` : ''
}

const CODES: SourcedText = {
  text: 'Local codes, the makers’ data sheets and laboratory tests come before anything said here.',
  source: sourceInWords('CP'),
}

/** Where work with such ware can hurt someone; empty where nothing is known. */
export function cautionsFor(fault: string): SourcedText[] {
  const own =
    FACTS.get(fault)?.cautions.map(({ fact, source }) => ({
      text: fact,
      source: sourceInWords(source),
    })) ?? []
  const rule = faultRule(fault)
  const note =
    own.length === 0 && rule?.safetyNote
      ? [{ text: rule.safetyNote, source: sourceInWords(rule.source) }]
      : []
  const all = [...own, ...note]
  return all.length === 0 ? [] : [...all, CODES]
}
