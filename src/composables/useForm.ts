import { computed, nextTick, onBeforeUnmount, onMounted, reactive, ref, toRaw, watch } from 'vue'
import type { ComputedRef, Ref } from 'vue'
import { onBeforeRouteLeave } from 'vue-router'
import type { z } from 'zod'
import { ApiError } from '../api/http'

interface Options<V extends object, R> {
  initial: V
  /** Checked before sending, with the same messages that the server would give. */
  schema?: z.ZodType
  /** Sends the values; an ApiError with fields ends up beside the fields. */
  submit: (values: V) => Promise<R>
  done?: (result: R, values: V) => unknown
  /** Ask before leaving with changes that were not sent. */
  guard?: boolean
}

export interface Form<V> {
  values: V
  /** Messages by field path (`lots.2.pieces`); gone as soon as that field is changed. */
  errors: Ref<Record<string, string>>
  /** What cannot be said beside a field. */
  message: Ref<string | null>
  busy: Ref<boolean>
  dirty: ComputedRef<boolean>
  send: () => Promise<boolean>
  reset: (values?: V) => void
  /** Puts an error of any call beside the fields. */
  refuse: (error: unknown) => void
}

const LEAVE = 'Leave without saving? What you changed here will be lost.'

/** A form: its values, what is wrong with them, and sending them once. */
export function useForm<V extends object, R = unknown>({
  initial,
  schema,
  submit,
  done,
  guard,
}: Options<V, R>): Form<V> {
  const values = reactive(copy(initial)) as V
  const start = ref(text(initial))
  const errors = ref<Record<string, string>>({})
  const message = ref<string | null>(null)
  const busy = ref(false)
  const dirty = computed(() => text(values) !== start.value)
  let refused: unknown = null

  function refuse(error: unknown): void {
    if (!(error instanceof ApiError)) throw error
    show(error.fields, error.message)
  }

  function show(fields: Readonly<Record<string, string>>, otherwise: string): void {
    refused = copy(values)
    errors.value = { ...fields }
    message.value = Object.keys(fields).length > 0 ? null : otherwise
    void nextTick(() =>
      document.querySelector<HTMLElement>('[aria-invalid="true"], .form-errors')?.focus(),
    )
  }

  /** Only the messages of fields that have not changed since stay. */
  watch(values, () => {
    const stays = Object.entries(errors.value).filter(
      ([path]) => text(pick(values, path)) === text(pick(refused, path)),
    )
    if (stays.length !== Object.keys(errors.value).length) errors.value = Object.fromEntries(stays)
  })

  async function send(): Promise<boolean> {
    if (busy.value) return false
    const problems = schema ? problemsOf(schema, values) : {}
    if (Object.keys(problems).length > 0) {
      show(problems, '')
      return false
    }
    busy.value = true
    errors.value = {}
    message.value = null
    try {
      const sent = copy(values)
      const result = await submit(sent)
      start.value = text(sent)
      await done?.(result, sent)
      return true
    } catch (error) {
      refuse(error)
      return false
    } finally {
      busy.value = false
    }
  }

  function reset(next: V = copy(initial)): void {
    Object.assign(values, copy(next))
    start.value = text(values)
    errors.value = {}
    message.value = null
  }

  if (guard) askBeforeLeaving(dirty)
  return { values, errors, message, busy, dirty, send, reset, refuse }
}

/** Messages of a schema by field path, the first of each field. */
export function problemsOf(schema: z.ZodType, values: unknown): Record<string, string> {
  const result = schema.safeParse(copy(values))
  if (result.success) return {}
  const problems: Record<string, string> = {}
  for (const issue of result.error.issues)
    problems[issue.path.map(String).join('.')] ??= issue.message
  return problems
}

function askBeforeLeaving(dirty: ComputedRef<boolean>): void {
  const beforeUnload = (event: BeforeUnloadEvent): void => {
    if (dirty.value) event.preventDefault()
  }
  onMounted(() => window.addEventListener('beforeunload', beforeUnload))
  onBeforeUnmount(() => window.removeEventListener('beforeunload', beforeUnload))
  onBeforeRouteLeave(() => !dirty.value || window.confirm(LEAVE))
}

const text = (value: unknown): string => JSON.stringify(value) ?? ''
const copy = <T>(value: T): T => JSON.parse(JSON.stringify(toRaw(value))) as T

function pick(value: unknown, path: string): unknown {
  return path
    .split('.')
    .reduce<unknown>(
      (part, key) =>
        part && typeof part === 'object' ? (part as Record<string, unknown>)[key] : undefined,
      value,
    )
}
