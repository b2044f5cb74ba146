import { flushPromises } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { defineComponent } from 'vue'
import { z } from 'zod'
import { ApiError } from '../../../src/api/http'
import { problemsOf, useForm } from '../../../src/composables/useForm'
import { mountUi } from '../../support/components'

interface Kiln {
  name: string
  lots: { pieces: number }[]
}
const initial: Kiln = { name: '', lots: [{ pieces: 1 }, { pieces: 2 }] }
const refusal = (fields: Record<string, string>) =>
  new ApiError({ status: 422, code: 'invalid', message: 'Some fields need another look.', fields })

const start = async (options: Partial<Parameters<typeof useForm<Kiln, string>>[0]> = {}) => {
  let form!: ReturnType<typeof useForm<Kiln, string>>
  const Page = defineComponent({
    setup() {
      form = useForm<Kiln, string>({ initial, submit: async () => 'saved', ...options })
      return () => null
    },
  })
  await mountUi(Page)
  return form
}

describe('useForm', () => {
  it('sends a copy of its values and hands the answer on', async () => {
    const told: unknown[] = []
    const form = await start({ done: (answer, values) => told.push(answer, values) })
    form.values.name = 'Front'
    expect(await form.send()).toBe(true)
    expect(told).toEqual(['saved', { name: 'Front', lots: [{ pieces: 1 }, { pieces: 2 }] }])
  })

  it('is dirty from the first change until it is sent', async () => {
    const form = await start()
    expect(form.dirty.value).toBe(false)
    form.values.name = 'Front'
    expect(form.dirty.value).toBe(true)
    await form.send()
    expect(form.dirty.value).toBe(false)
  })

  it('puts what the server says beside the fields', async () => {
    const form = await start({
      submit: () =>
        Promise.reject(refusal({ name: 'Enter a name.', 'lots.1.pieces': 'Too many.' })),
    })
    expect(await form.send()).toBe(false)
    expect(form.errors.value).toEqual({ name: 'Enter a name.', 'lots.1.pieces': 'Too many.' })
    expect(form.message.value).toBeNull()
    expect(form.busy.value).toBe(false)
  })

  it('takes a message away once its field is changed, and no other', async () => {
    const form = await start({
      submit: () =>
        Promise.reject(refusal({ name: 'Enter a name.', 'lots.1.pieces': 'Too many.' })),
    })
    await form.send()
    const second = form.values.lots[1]
    if (second) second.pieces = 3
    await flushPromises()
    expect(form.errors.value).toEqual({ name: 'Enter a name.' })
  })

  it('says above the form what belongs to no field', async () => {
    const stale = new ApiError({ status: 409, code: 'stale', message: 'The firing has changed.' })
    const form = await start({ submit: () => Promise.reject(stale) })
    await form.send()
    expect(form.message.value).toBe('The firing has changed.')
  })

  it('checks with the schema before it sends', async () => {
    let sent = 0
    const schema = z.object({
      name: z.string().min(1, 'Enter a name.'),
      lots: z.array(z.object({ pieces: z.number() })),
    })
    const form = await start({
      schema,
      submit: async () => {
        sent += 1
        return 'saved'
      },
    })
    expect(await form.send()).toBe(false)
    expect(form.errors.value).toEqual({ name: 'Enter a name.' })
    form.values.name = 'Front'
    expect(await form.send()).toBe(true)
    expect(sent).toBe(1)
  })

  it('sends once, however often it is pressed', async () => {
    let sent = 0
    let arrive: (answer: string) => void = () => undefined
    const form = await start({
      submit: () => {
        sent += 1
        return new Promise<string>((resolve) => (arrive = resolve))
      },
    })
    const first = form.send()
    expect(await form.send()).toBe(false)
    arrive('saved')
    expect(await first).toBe(true)
    expect(sent).toBe(1)
  })

  it('goes back to how it began', async () => {
    const form = await start()
    form.values.name = 'Front'
    form.values.lots = []
    form.reset()
    expect(form.values).toEqual(initial)
    expect(form.dirty.value).toBe(false)
  })

  it('leaves errors that are no answer of a call to the error boundary', async () => {
    const form = await start({ submit: () => Promise.reject(new TypeError('a fault of ours')) })
    await expect(form.send()).rejects.toThrow('a fault of ours')
  })
})

describe('problemsOf', () => {
  it('gives the first message of each field by its path', () => {
    const schema = z.object({
      lots: z.array(
        z.object({ pieces: z.int('Whole pieces only.').min(1, 'At least one piece.') }),
      ),
    })
    expect(problemsOf(schema, { lots: [{ pieces: 1 }, { pieces: 0 }] })).toEqual({
      'lots.1.pieces': 'At least one piece.',
    })
  })
})
