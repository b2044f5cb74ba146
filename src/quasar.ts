import { mdiChevronDown, mdiClose } from '@quasar/extras/mdi-v7'
import iconSet from 'quasar/icon-set/svg-mdi-v7'

/** Quasar without plugins, its few arrows and crosses drawn as ours. */
export const quasarOptions = {
  plugins: {},
  iconSet: {
    ...iconSet,
    arrow: { ...iconSet.arrow, dropdown: mdiChevronDown },
    chip: { ...iconSet.chip, remove: mdiClose },
    field: { ...iconSet.field, clear: mdiClose },
  },
}
