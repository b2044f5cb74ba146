import { flushPromises } from '@vue/test-utils'
import { describe, expect, it, vi } from 'vitest'
import { ref } from 'vue'
import ConfirmDialog from '../../../src/components/ui/ConfirmDialog.vue'
import QueryState from '../../../src/components/ui/QueryState.vue'
import ToastHost from '../../../src/components/ui/ToastHost.vue'
import UiButton from '../../../src/components/ui/UiButton.vue'
import UiCombobox from '../../../src/components/ui/UiCombobox.vue'
import UiMenu from '../../../src/components/ui/UiMenu.vue'
import { ApiError } from '../../../src/api/http'
import { byName, mountUi } from '../../support/components'

const query = (data: unknown, error: Error | null = null) => ({
  data: ref(data),
  error: ref(error),
  refetch: vi.fn(),
})
const failed = (status: number) =>
  new ApiError({ status, code: 'x', message: 'Away.', requestId: 'r7' })
const state = (made: ReturnType<typeof query>) =>
  mountUi(QueryState, {
    props: { query: made, what: 'losses' },
    slots: { default: '<template #default="{ data }">{{ data }} lost</template>' },
  })

describe('QueryState', () => {
  it('says that it is loading', async () => {
    const { wrapper } = await state(query(undefined))
    expect(wrapper.get('[role="status"]').text()).toBe('Loading the losses')
  })

  it('hands on what is there', async () => {
    expect((await state(query(31))).wrapper.text()).toBe('31 lost')
  })

  it('keeps what is there when a later look fails', async () => {
    expect((await state(query(31, failed(500)))).wrapper.text()).toBe('31 lost')
  })

  it('says what went wrong with the number to tell, and tries again', async () => {
    const made = query(undefined, failed(500))
    const { wrapper } = await state(made)
    expect(wrapper.get('[role="alert"]').text()).toContain('r7')
    byName('button', 'Try again').click()
    expect(made.refetch).toHaveBeenCalledOnce()
  })

  it('tells a missing role from a missing thing', async () => {
    expect((await state(query(undefined, failed(403)))).wrapper.get('h1').text()).toBe(
      'Your roles do not open this page',
    )
    expect((await state(query(undefined, failed(404)))).wrapper.get('h1').text()).toBe(
      'There is nothing at this address',
    )
  })
})

describe('UiButton', () => {
  it('is a link where it leads somewhere', async () => {
    const { wrapper } = await mountUi(UiButton, {
      props: { to: { name: 'firing-new', params: { network: 'kettle' } } },
    })
    expect(wrapper.get('a').attributes('href')).toBe('/kettle/firings/new')
  })

  it('takes no second press while it works', async () => {
    const pressed = vi.fn()
    await mountUi(UiButton, { props: { busy: true, onClick: pressed }, slots: { default: 'Save' } })
    document.querySelector('button')?.click()
    expect(pressed).not.toHaveBeenCalled()
  })

  it('says whether it is on', async () => {
    const { wrapper } = await mountUi(UiButton, { props: { pressed: true } })
    expect(wrapper.get('button').attributes('aria-pressed')).toBe('true')
  })
})

describe('UiMenu', () => {
  it('does what is picked, and closes', async () => {
    const run = vi.fn()
    await mountUi(UiMenu, {
      props: {
        label: 'More',
        items: [
          { label: 'As last time', run },
          { label: 'Void', disabled: true },
        ],
      },
    })
    byName('button', 'More').click()
    await flushPromises()
    byName('[role="menuitem"]', 'As last time').click()
    await flushPromises()
    expect(run).toHaveBeenCalledOnce()
    expect(byName('button', 'More').getAttribute('aria-expanded')).toBe('false')
  })
})

describe('ConfirmDialog', () => {
  it('is a named dialog whose button says what it does', async () => {
    const { wrapper } = await mountUi(ConfirmDialog, {
      props: {
        open: true,
        title: 'Void this firing?',
        confirmLabel: 'Void the firing',
        danger: true,
      },
    })
    await flushPromises()
    const dialog = document.querySelector('[role="dialog"]')
    const name = document.getElementById(dialog?.getAttribute('aria-labelledby') ?? '')
    expect(name?.textContent).toBe('Void this firing?')
    byName('button', 'Void the firing').click()
    expect(wrapper.emitted('confirm')).toHaveLength(1)
  })

  it('closes by Cancel without doing it', async () => {
    const { wrapper } = await mountUi(ConfirmDialog, {
      props: { open: true, title: 'Void?', confirmLabel: 'Void' },
    })
    await flushPromises()
    byName('button', 'Cancel').click()
    expect(wrapper.emitted('update:open')).toEqual([[false]])
    expect(wrapper.emitted('confirm')).toBeUndefined()
  })
})

describe('ToastHost', () => {
  it('does the one thing that can be done about a notice, and puts it away', async () => {
    const run = vi.fn()
    const { wrapper } = await mountUi(ToastHost, {
      props: {
        toasts: [{ id: 7, text: 'Kiln archived.', tone: 'done', action: { label: 'Undo', run } }],
      },
    })
    byName('button', 'Undo').click()
    expect(run).toHaveBeenCalledOnce()
    expect(wrapper.emitted('dismiss')).toEqual([[7]])
  })
})

describe('UiCombobox', () => {
  const options = [
    { value: 'c', label: 'Celadon' },
    { value: 't', label: 'Tenmoku' },
  ]

  it('shows the name of what is chosen and is tied to its label', async () => {
    const { wrapper } = await mountUi(UiCombobox, {
      props: { modelValue: 't', label: 'Glaze', options },
    })
    await flushPromises()
    const control = document.getElementById(
      wrapper.get('label').attributes('for') ?? '',
    ) as HTMLInputElement
    expect(control.value).toBe('Tenmoku')
  })

  it('says what is wrong to whoever is in it', async () => {
    const { wrapper } = await mountUi(UiCombobox, {
      props: { modelValue: null, label: 'Glaze', options, error: 'Choose a glaze.' },
    })
    const control = document.getElementById(wrapper.get('label').attributes('for') ?? '')
    expect(control?.getAttribute('aria-invalid')).toBe('true')
    expect(
      document.getElementById(control?.getAttribute('aria-describedby')?.split(' ')[0] ?? '')
        ?.textContent,
    ).toBe('Choose a glaze.')
  })
})
