import { nextTick } from 'vue'
import { useRouter } from 'vue-router'
import { useSessionStore } from '../stores/session'
import { titleOf } from './usePageTitle'

/**
 * After a change of page the title of the window and the focus follow: to the page's heading, else to
 * its main part, so that keyboard and screen reader begin where the page does. Filters are no change of page.
 */
export function useRouteFocus(): void {
  const router = useRouter()
  const session = useSessionStore()
  router.afterEach((to, from, failure) => {
    if (failure) return
    const network =
      typeof to.params.network === 'string' ? session.network(to.params.network)?.name : undefined
    document.title = titleOf(to.meta.title === 'Duntless' ? '' : to.meta.title, network)
    // The first page is the browser's own business.
    if (to.path === from.path || from.matched.length === 0) return
    void nextTick(() => {
      const target =
        document.querySelector<HTMLElement>('#main h1') ?? document.getElementById('main')
      target?.setAttribute('tabindex', '-1')
      target?.focus({ preventScroll: true })
    })
  })
}
