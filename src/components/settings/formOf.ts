import type { Ref } from 'vue'

/** The part of useForm's answer that a dialog draws: it is made by the section, which sends it. */
export interface FormOf<V> {
  values: V
  errors: Ref<Record<string, string>>
  message: Ref<string | null>
  busy: Ref<boolean>
  send: () => Promise<boolean>
}
