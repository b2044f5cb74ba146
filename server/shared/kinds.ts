/** Kinds of firing. A once-fired load has the id `single`. Kinds are never pooled into one rate. */
export const FIRING_KINDS = ['bisque', 'glaze', 'single', 'lustre', 'raku'] as const
export type FiringKind = (typeof FIRING_KINDS)[number]

export const FIRING_KIND_NAMES: Readonly<Record<FiringKind, string>> = {
  bisque: 'bisque',
  glaze: 'glaze',
  single: 'once-fired',
  lustre: 'lustre',
  raku: 'raku',
}

/** Pyrometric cones of the US series, coolest first (from memory of the maker's chart; the names alone are used here). */
export const CONES = [
  '022',
  '021',
  '020',
  '019',
  '018',
  '017',
  '016',
  '015',
  '014',
  '013',
  '012',
  '011',
  '010',
  '09',
  '08',
  '07',
  '06',
  '05',
  '04',
  '03',
  '02',
  '01',
  '1',
  '2',
  '3',
  '4',
  '5',
  '6',
  '7',
  '8',
  '9',
  '10',
  '11',
  '12',
  '13',
  '14',
] as const
