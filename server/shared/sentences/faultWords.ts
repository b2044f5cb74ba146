/** Faults as the subject of a sentence, as a potter would say it: wording of our own, common practice, no source. */
export interface FaultWords {
  /** "S-cracks", "Crazing", "Handles and spouts". */
  subject: string
  /** "show", "shows", "crack". */
  present: string
  /** "showed", "cracked". */
  past: string
  /** After "did not": "show", "crack". */
  base: string
}

const many = (subject: string): FaultWords => ({
  subject,
  present: 'show',
  past: 'showed',
  base: 'show',
})
const mass = (subject: string): FaultWords => ({
  subject,
  present: 'shows',
  past: 'showed',
  base: 'show',
})
const cracking = (subject: string): FaultWords => ({
  subject,
  present: 'crack',
  past: 'cracked',
  base: 'crack',
})

const WORDS: Readonly<Record<string, FaultWords>> = {
  'crack-not-named': many('Cracks and breaks'),
  'base-crack': many('Cracks in the base'),
  's-crack': many('S-cracks'),
  'slab-base-straight-crack': many('Straight cracks in slab bases'),
  'star-base-crack': many('Star cracks in the base'),
  'base-perimeter-crack': many('Cracks round the base edge'),
  'rim-crack': many('Cracks from the rim'),
  'vertical-rim-crack': many('Vertical cracks from the rim'),
  'stacked-greenware-rim-crack': many('Rim cracks from stacking'),
  'joint-crack': cracking('Joints and seams'),
  'attached-part-joint-crack': cracking('Handles and spouts'),
  'seam-crack': cracking('Seams'),
  'lug-sprig-detach': {
    subject: 'Lugs, sprigs and small parts',
    present: 'come off',
    past: 'came off',
    base: 'come off',
  },
  'drying-crack': many('Making and drying cracks'),
  'slab-hinge-crack': many('Cracks along slab folds'),
  'lamination-split': many('Lamination splits'),
  'lid-gallery-crack': cracking('Lids and galleries'),
  dunt: many('Dunts'),
  'preheat-dunt': many('Dunts from heating up'),
  'cooling-dunt': many('Dunts from cooling'),
  'cooling-dunt-quartz': many('Quartz dunts'),
  'cristobalite-dunt': many('Cristobalite dunts'),
  'refire-crack': many('Refire cracks'),
  'burst-or-shattered': many('Burst and shattered pieces'),
  'steam-blowout': many('Blow-outs'),
  'glaze-stress-shatter': many('Breaks from one-sided glaze stress'),
  'body-fault': many('Faults of the body'),
  'out-of-shape': many('Pieces out of shape'),
  warping: many('Warped pieces'),
  'slumping-overfire': many('Slumped and overfired pieces'),
  'lime-pop': many('Lime pops'),
  bloating: many('Bloated pieces'),
  'black-core': many('Black cores'),
  'porous-body-leak': many('Leaking and seeping pieces'),
  'scumming-mould': many('Scum and mould'),
  'glaze-fit': many('Faults of glaze fit'),
  crazing: mass('Crazing'),
  'delayed-crazing': mass('Late crazing'),
  shivering: many('Shivering and peeling'),
  'glaze-surface': many('Faults of the glaze surface'),
  crawling: mass('Crawling'),
  'holes-or-bubbles': many('Holes and bubbles in the glaze'),
  pinholing: many('Pinholes'),
  blistering: many('Blisters'),
  'run-or-thick': many('Runs and thick glaze'),
  'running-stuck': many('Glaze runs and stuck pieces'),
  'glaze-too-thick': mass('Too thick a glaze'),
  'underfired-dry-glaze': mass('Underfired or dry glaze'),
  'colour-fault': many('Colour faults'),
  'cutlery-marking': many('Cutlery marks'),
  handling: many('Faults of handling, loading and kiln'),
  'handling-chip': many('Chips and knocks'),
  plucking: many('Plucked feet'),
  'kiln-debris': many('Kiln crumbs on the glaze'),
  other: many('Faults that are not in the guide'),
}

/** How a fault is spoken of; a node without words of its own goes by its id, so that nothing is left unsaid. */
export function faultWords(fault: string): FaultWords {
  return WORDS[fault] ?? many(`Faults of the kind “${fault}”`)
}

/** Whether a fault node has words of its own. */
export function hasFaultWords(fault: string): boolean {
  return fault in WORDS
}
