import { onBeforeUnmount, onMounted } from 'vue'
import { onBeforeRouteLeave } from 'vue-router'

interface Actions {
  add: () => unknown
  duplicate: () => unknown
  remove: () => unknown
  send: () => unknown
}

/** Keys of the load sheet, beside which they are written: Alt+Enter, Ctrl+D, Alt+Delete, Ctrl+Enter. */
export function usePackKeys(actions: Actions, active: () => boolean): void {
  function of(event: KeyboardEvent): (() => unknown) | undefined {
    const ctrl = event.ctrlKey || event.metaKey
    if (event.altKey === ctrl) return undefined
    if (event.altKey) return { Enter: actions.add, Delete: actions.remove }[event.key]
    return { enter: actions.send, d: actions.duplicate }[event.key.toLowerCase()]
  }

  function onKeydown(event: KeyboardEvent): void {
    const run = active() ? of(event) : undefined
    if (!run) return
    event.preventDefault()
    run()
  }

  onMounted(() => window.addEventListener('keydown', onKeydown))
  onBeforeUnmount(() => window.removeEventListener('keydown', onKeydown))
}

/** Asks before leaving where something would be lost; what is kept on the device is not. */
export function useLeaveGuard(wouldLose: () => boolean, question: string): void {
  const beforeUnload = (event: BeforeUnloadEvent): void => {
    if (wouldLose()) event.preventDefault()
  }
  onMounted(() => window.addEventListener('beforeunload', beforeUnload))
  onBeforeUnmount(() => window.removeEventListener('beforeunload', beforeUnload))
  onBeforeRouteLeave(() => !wouldLose() || window.confirm(question))
}
