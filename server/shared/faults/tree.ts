/**
 * The fault tree: what can be reported. Leaves are the faults of the guide, the nodes above them
 * are for the hurried; a child counts in every node above it. The tree groups by what is seen.
 * Names are the trade's; the grouping is common practice, no source.
 */
export interface FaultNode {
  id: string
  parent: string | null
  name: string
  /** Name for narrow places. */
  short: string
  leaf: boolean
}

/* prettier-ignore */
export const FAULT_TREE: readonly FaultNode[] = [
  { id: 'crack-not-named', parent: null, name: "Crack or break, not named", short: "Other crack", leaf: false },
  { id: 'base-crack', parent: 'crack-not-named', name: "Crack in the base", short: "Base crack", leaf: false },
  { id: 's-crack', parent: 'base-crack', name: "S-crack", short: "S-crack", leaf: true },
  { id: 'slab-base-straight-crack', parent: 'base-crack', name: "Straight base crack in slab work", short: "Slab base split", leaf: true },
  { id: 'star-base-crack', parent: 'base-crack', name: "Star or shattered base", short: "Star base", leaf: true },
  { id: 'base-perimeter-crack', parent: 'base-crack', name: "Crack round the base edge", short: "Round the base", leaf: true },
  { id: 'rim-crack', parent: 'crack-not-named', name: "Crack from the rim", short: "Rim crack", leaf: false },
  { id: 'vertical-rim-crack', parent: 'rim-crack', name: "Vertical crack from the rim", short: "Down from the rim", leaf: true },
  { id: 'stacked-greenware-rim-crack', parent: 'rim-crack', name: "Rim crack from stacked or nested greenware", short: "Rim, from stacking", leaf: true },
  { id: 'joint-crack', parent: 'crack-not-named', name: "Crack at a joint or seam, or a part off", short: "Joint crack", leaf: false },
  { id: 'attached-part-joint-crack', parent: 'joint-crack', name: "Joint crack or springing of handle or spout", short: "Handle or spout", leaf: true },
  { id: 'seam-crack', parent: 'joint-crack', name: "Seam crack", short: "Seam", leaf: true },
  { id: 'lug-sprig-detach', parent: 'joint-crack', name: "Lug, sprig or small part detached", short: "Lug or sprig off", leaf: true },
  { id: 'drying-crack', parent: 'crack-not-named', name: "Making or drying crack elsewhere", short: "Drying crack", leaf: false },
  { id: 'slab-hinge-crack', parent: 'drying-crack', name: "Slab hinge crack", short: "Fold crack", leaf: true },
  { id: 'lamination-split', parent: 'drying-crack', name: "Lamination split", short: "Layer split", leaf: true },
  { id: 'lid-gallery-crack', parent: 'crack-not-named', name: "Lid or gallery crack", short: "Lid or gallery", leaf: true },
  { id: 'dunt', parent: 'crack-not-named', name: "Dunt: crack from heating up or cooling", short: "Dunt", leaf: false },
  { id: 'preheat-dunt', parent: 'dunt', name: "Preheat dunt (heating-up crack)", short: "Heating-up dunt", leaf: true },
  { id: 'cooling-dunt', parent: 'dunt', name: "Cooling dunt, which of the two not known", short: "Cooling dunt", leaf: false },
  { id: 'cooling-dunt-quartz', parent: 'cooling-dunt', name: "Cooling dunt (quartz)", short: "Quartz dunt", leaf: true },
  { id: 'cristobalite-dunt', parent: 'cooling-dunt', name: "Cristobalite dunt", short: "Cristobalite dunt", leaf: true },
  { id: 'refire-crack', parent: 'dunt', name: "Refire crack", short: "Refire crack", leaf: true },
  { id: 'burst-or-shattered', parent: 'crack-not-named', name: "Burst or shattered", short: "In pieces", leaf: false },
  { id: 'steam-blowout', parent: 'burst-or-shattered', name: "Steam explosion / blow-out", short: "Blow-out", leaf: true },
  { id: 'glaze-stress-shatter', parent: 'burst-or-shattered', name: "One-sided glaze stress shatter", short: "Glaze-stress break", leaf: true },
  { id: 'body-fault', parent: null, name: "Fault of the body", short: "Body fault", leaf: false },
  { id: 'out-of-shape', parent: 'body-fault', name: "Out of shape", short: "Out of shape", leaf: false },
  { id: 'warping', parent: 'out-of-shape', name: "Warping", short: "Warped", leaf: true },
  { id: 'slumping-overfire', parent: 'out-of-shape', name: "Slumping or overfire", short: "Slumped", leaf: true },
  { id: 'lime-pop', parent: 'body-fault', name: "Lime pop", short: "Lime pop", leaf: true },
  { id: 'bloating', parent: 'body-fault', name: "Bloating", short: "Bloated", leaf: true },
  { id: 'black-core', parent: 'body-fault', name: "Black core", short: "Black core", leaf: true },
  { id: 'porous-body-leak', parent: 'body-fault', name: "Leaking or seeping body", short: "Leaks", leaf: true },
  { id: 'scumming-mould', parent: 'body-fault', name: "Scum (soluble salts) and mould on greenware", short: "Scum or mould", leaf: true },
  { id: 'glaze-fit', parent: null, name: "Glaze and clay do not fit", short: "Glaze fit", leaf: false },
  { id: 'crazing', parent: 'glaze-fit', name: "Crazing", short: "Crazing", leaf: true },
  { id: 'delayed-crazing', parent: 'glaze-fit', name: "Delayed crazing (moisture growth)", short: "Late crazing", leaf: true },
  { id: 'shivering', parent: 'glaze-fit', name: "Shivering or peeling", short: "Shivering", leaf: true },
  { id: 'glaze-surface', parent: null, name: "Glaze surface fault", short: "Glaze surface", leaf: false },
  { id: 'crawling', parent: 'glaze-surface', name: "Crawling", short: "Crawling", leaf: true },
  { id: 'holes-or-bubbles', parent: 'glaze-surface', name: "Holes or bubbles in the glaze", short: "Holes, bubbles", leaf: false },
  { id: 'pinholing', parent: 'holes-or-bubbles', name: "Pinholing", short: "Pinholes", leaf: true },
  { id: 'blistering', parent: 'holes-or-bubbles', name: "Blistering", short: "Blisters", leaf: true },
  { id: 'run-or-thick', parent: 'glaze-surface', name: "Glaze run or too thick", short: "Run or thick", leaf: false },
  { id: 'running-stuck', parent: 'run-or-thick', name: "Running glaze, stuck to shelf", short: "Run or stuck", leaf: true },
  { id: 'glaze-too-thick', parent: 'run-or-thick', name: "Glaze too thick", short: "Too thick", leaf: true },
  { id: 'underfired-dry-glaze', parent: 'glaze-surface', name: "Underfired or dry glaze", short: "Dry glaze", leaf: true },
  { id: 'colour-fault', parent: 'glaze-surface', name: "Colour fault, flashing or contamination", short: "Colour fault", leaf: true },
  { id: 'cutlery-marking', parent: 'glaze-surface', name: "Cutlery marking", short: "Cutlery marks", leaf: true },
  { id: 'handling', parent: null, name: "Handling, loading or kiln", short: "Handling", leaf: false },
  { id: 'handling-chip', parent: 'handling', name: "Handling chip or knock", short: "Chip or knock", leaf: true },
  { id: 'plucking', parent: 'handling', name: "Plucking or sticking", short: "Plucked foot", leaf: true },
  { id: 'kiln-debris', parent: 'handling', name: "Kiln debris on glaze", short: "Kiln crumbs", leaf: true },
  { id: 'other', parent: null, name: "Other, not in the guide", short: "Other", leaf: false },
]

/** What a phone shows first at the kiln, in order. At a bisque, those that need glaze are left out. */
export const AT_THE_KILN: readonly string[] = [
  's-crack',
  'rim-crack',
  'joint-crack',
  'dunt',
  'crack-not-named',
  'steam-blowout',
  'warping',
  'crazing',
  'crawling',
  'pinholing',
  'running-stuck',
  'handling-chip',
]

const byId = new Map(FAULT_TREE.map((node) => [node.id, node]))
const below = new Map<string, string[]>()
for (const node of FAULT_TREE) {
  for (let at: FaultNode | undefined = node; at; at = at.parent ? byId.get(at.parent) : undefined) {
    below.set(at.id, [...(below.get(at.id) ?? []), node.id])
  }
}

/** The node of an id, or undefined for an id that is not in the tree. */
export function faultNode(id: string): FaultNode | undefined {
  return byId.get(id)
}

/** The id itself and every node above it, nearest first. Empty for an unknown id. */
export function withAncestors(id: string): string[] {
  const path: string[] = []
  for (let at = byId.get(id); at; at = at.parent ? byId.get(at.parent) : undefined) path.push(at.id)
  return path
}

/** The id itself and every node below it: what a filter for a coarse fault means. */
export function withDescendants(id: string): string[] {
  return below.get(id) ?? []
}

/** The children of a node (null: the roots), in the tree's order. */
export function childrenOf(id: string | null): FaultNode[] {
  return FAULT_TREE.filter((node) => node.parent === id)
}
