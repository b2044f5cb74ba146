import { FACTORS, type Factor } from '../shared/factors.js'
import { faultNode } from '../shared/faults/index.js'
import { FAULT_ALIASES, normaliseFaultName } from '../shared/faults/aliases.js'

/** What a column of a lot sheet can be beside a factor or a fault. */
export type SheetField =
  | 'studio'
  | 'kiln'
  | 'firing'
  | 'kind'
  | 'date'
  | 'cone'
  | 'pieces'
  | 'turnedAway'
  | 'notLookedAt'
  | 'refireCount'
  | 'lostTotal'

export type SheetColumn =
  | { header: string; is: 'field'; field: SheetField }
  | { header: string; is: 'factor'; factor: Factor }
  /** Pieces lost to a fault: a node of the fault tree. */
  | { header: string; is: 'fault'; fault: string }
  /** Says "lost" of something that is no fault we know: asked, never guessed. */
  | { header: string; is: 'unknown-fault' }
  | { header: string; is: 'unknown' }

/** Names as `normalise` leaves them. Common words of lot sheets, no source. */
const FIELD_NAMES: Readonly<Record<SheetField, readonly string[]>> = {
  studio: ['studio', 'studio_name', 'workshop'],
  kiln: ['kiln', 'kiln_name', 'kiln_id'],
  firing: ['firing', 'firing_id', 'firing_no', 'firing_number', 'load', 'load_id'],
  kind: ['kind', 'firing_kind', 'firing_type', 'kind_of_firing'],
  date: ['date', 'unloaded_on', 'unloaded', 'fired_on', 'firing_date', 'unload_date', 'local_date'],
  cone: ['cone', 'witness_cone'],
  pieces: ['pieces', 'units', 'offered', 'pieces_offered', 'number_of_pieces'],
  turnedAway: ['turned_away', 'pieces_turned_away'],
  notLookedAt: ['not_looked_at', 'pieces_not_looked_at'],
  refireCount: ['refire_count', 'refires_before'],
  lostTotal: ['lost', 'lost_total', 'total_lost', 'wasters', 'losses', 'pieces_lost'],
}

/** Names of factors beside their id, their name and its plural. */
const FACTOR_NAMES: Readonly<Record<string, readonly string[]>> = {
  clay_body: ['clay', 'body'],
  drying_practice: ['drying', 'dried_how'],
  joining_practice: ['joining'],
  glazing_practice: ['glazing'],
  programme: ['program', 'schedule', 'firing_program', 'firing_schedule'],
  thickness_band: ['thickness', 'wall_thickness'],
  forming: ['made_by', 'making', 'technique'],
  rack: ['drying_rack'],
  opening_temperature: ['opened_at', 'opening_temperature_c'],
  shelf: ['kiln_shelf'],
}

const FIELDS = new Map<string, SheetField>(
  (Object.keys(FIELD_NAMES) as SheetField[]).flatMap((field) =>
    FIELD_NAMES[field].map((name): [string, SheetField] => [name, field]),
  ),
)

const FACTOR_OF = new Map<string, Factor>(
  FACTORS.filter((factor) => factor.id !== 'kiln').flatMap((factor) =>
    [factor.id, factor.name, factor.plural, ...(FACTOR_NAMES[factor.id] ?? [])].map(
      (name): [string, Factor] => [normalise(name), factor],
    ),
  ),
)

/** Lower case, anything but letters and digits one underscore. */
export function normalise(text: string): string {
  return text
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, '_')
    .replace(/^_+|_+$/g, '')
}

/** What the column of that header holds. */
export function recogniseColumn(header: string): SheetColumn {
  const name = normalise(header)
  const field = FIELDS.get(name)
  if (field !== undefined) return { header, is: 'field', field }
  const factor = FACTOR_OF.get(name)
  if (factor !== undefined) return { header, is: 'factor', factor }
  const fault = faultOfColumn(header)
  if (fault !== null) return { header, is: 'fault', fault }
  return {
    header,
    is: /^(lost|losses|loss)_|_(lost|losses|loss)$/.test(name) ? 'unknown-fault' : 'unknown',
  }
}

/** The fault that a column counts: by alias, or by the id of a node of the tree. */
function faultOfColumn(header: string): string | null {
  const plain = normalise(header)
  // The full name first: "lost_lug" is a lug that is off, not a fault called lug.
  for (const name of [plain, normaliseFaultName(header)]) {
    const alias = FAULT_ALIASES[name]
    if (alias !== undefined) return alias
    const node = faultNode(name.replaceAll('_', '-'))
    if (node !== undefined) return node.id
  }
  return null
}

/** Fields in words, for messages. */
export const FIELD_WORDS: Readonly<Record<SheetField, string>> = {
  studio: 'the studio',
  kiln: 'the kiln',
  firing: 'the firing',
  kind: 'the kind of firing',
  date: 'the date of unloading',
  cone: 'the cone',
  pieces: 'the number of pieces',
  turnedAway: 'the pieces turned away',
  notLookedAt: 'the pieces not looked at',
  refireCount: 'the number of refires before',
  lostTotal: 'the pieces lost in all',
}
