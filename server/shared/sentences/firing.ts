/** A firing and its lots in words: names, what was lost, what is recorded. The same on pages, in mails and on paper. */
import type { LossOutcome, LotCounts } from '../counts.js'
import { fired } from '../counts.js'
import { faultNode } from '../faults/tree.js'
import type { FiringKind } from '../kinds.js'
import { FIRING_KIND_NAMES } from '../kinds.js'
import { formatCount, plural } from '../plural.js'

/** A stretch of a sentence; the strong ones carry the figure. */
export interface Stretch {
  text: string
  strong?: true
}

/** What names a lot: levels by factor, as many as are recorded. */
export interface NamedLot {
  isRest: boolean
  levels: Readonly<Record<string, readonly { name: string }[]>>
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

/**
 * "Mugs, speckled buff, celadon": form, clay body and glazes; where none is recorded, class or forming;
 * else its number. The rest is "The rest", or the whole load where there is no other lot.
 */
export function lotName(lot: NamedLot, position: number, lots: number): string {
  if (lot.isRest) return lots > 1 ? 'The rest' : 'The whole load'
  const of = (factor: string): string[] => (lot.levels[factor] ?? []).map(({ name }) => name)
  const parts = [...of('form'), ...of('clay_body'), ...of('glaze')]
  const name = parts.length > 0 ? parts : [...of('class'), ...of('forming')].slice(0, 1)
  return name.length > 0 ? capital(name.join(', ')) : `Lot ${position + 1}`
}

/** "glaze, cone 6" or "bisque". */
export function kindAndCone(kind: FiringKind, cone: string | null): string {
  return cone === null ? FIRING_KIND_NAMES[kind] : `${FIRING_KIND_NAMES[kind]}, cone ${cone}`
}

/** "about 90 pieces", "1 piece". */
export function piecesInWords(pieces: number, about = false): string {
  return about ? `about ${plural(pieces, 'piece')}` : plural(pieces, 'piece')
}

/** Failed outcomes of fired pieces in words, nought left out: ["3 wasters", "1 refire"]. */
export function failures(counts: LotCounts): string[] {
  return [
    counts.wasters > 0 ? plural(counts.wasters, 'waster') : '',
    counts.refires > 0 ? plural(counts.refires, 'refire') : '',
  ].filter(Boolean)
}

/** "2 lost, 1 second, 1 undecided, 3 not looked at"; "all sound" where nothing is. */
export function outcomeWords(counts: LotCounts): string {
  const lost = counts.wasters + counts.refires
  const parts = [
    lost > 0 ? `${formatCount(lost)} lost` : '',
    counts.seconds > 0 ? plural(counts.seconds, 'second') : '',
    counts.undecided > 0 ? `${formatCount(counts.undecided)} undecided` : '',
    counts.notLookedAt > 0 ? `${formatCount(counts.notLookedAt)} not looked at` : '',
  ].filter(Boolean)
  return parts.length > 0 ? parts.join(', ') : 'all sound'
}

/** "S-crack, also crazing: 2 wasters (a neighbour did it)". */
export function lossInWords(loss: {
  fault: string
  also: readonly string[]
  outcome: LossOutcome
  pieces: number
  neighbour: boolean
}): string {
  const name = (id: string): string => faultNode(id)?.name ?? id
  const also =
    loss.also.length > 0
      ? `, also ${loss.also.map((id) => name(id).toLowerCase()).join(' and ')}`
      : ''
  return `${name(loss.fault)}${also}: ${outcomeCount(loss.outcome, loss.pieces)}${loss.neighbour ? ' (a neighbour did it)' : ''}`
}

function outcomeCount(outcome: LossOutcome, pieces: number): string {
  if (outcome === 'turned-away') return `${formatCount(pieces)} turned away`
  return outcome === 'undecided' ? `${formatCount(pieces)} undecided` : plural(pieces, outcome)
}

export interface FiringInWords extends LotCounts {
  status: 'packed' | 'reported' | 'void'
  about: boolean
}

/** The answer that a firing's page begins with. */
export function firingAnswer(firing: FiringInWords): Stretch[] {
  if (firing.status === 'packed') {
    return [
      { text: capital(piecesInWords(firing.pieces, firing.about)), strong: true },
      { text: ' went in; what came out is not reported yet.' },
    ]
  }
  const lost = firing.wasters + firing.refires
  const seen = fired(firing) - firing.notLookedAt
  if (seen <= 0)
    return [{ text: 'No piece', strong: true }, { text: ' of this firing was looked at.' }]
  const of = `of ${piecesInWords(seen, firing.about)}`
  const further = also(firing)
  if (lost === 0) return [{ text: `None ${of}`, strong: true }, { text: ` was lost${further}.` }]
  return [
    { text: `${formatCount(lost)} ${of}`, strong: true },
    { text: ` ${lost === 1 ? 'was' : 'were'} lost: ${failures(firing).join(' and ')}${further}.` },
  ]
}

function also(counts: LotCounts): string {
  const parts = [
    counts.seconds > 0 ? plural(counts.seconds, 'second') : '',
    counts.undecided > 0 ? `${formatCount(counts.undecided)} still undecided` : '',
  ].filter(Boolean)
  return parts.length > 0 ? `; ${parts.join(', ')}` : ''
}

export const WHOLE_LOAD_CAUSE_NAMES: Readonly<Record<string, string>> = {
  power: 'the power failed',
  probe: 'the probe or controller failed',
  'wrong-programme': 'the wrong programme ran',
  other: 'another cause',
}

/** What a revision did, in words: "packed", "reported", "amended". */
export const REVISION_NAMES = {
  pack: 'packed',
  report: 'reported',
  amend: 'amended',
  late: 'late loss added',
  void: 'voided',
} as const
