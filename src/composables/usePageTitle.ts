import { watchEffect } from 'vue'
import { useNetwork } from './useNetwork'

/** Title of the window: the page, the network, the product. */
export function titleOf(page: string, network?: string): string {
  return [page, network, 'Duntless'].filter(Boolean).join(' · ')
}

/** A title that says more than the route's: "Front kiln, 3 May". Empty while the page does not know yet. */
export function usePageTitle(page: () => string | undefined): void {
  const network = useNetwork()
  watchEffect(() => {
    const title = page()
    if (title) document.title = titleOf(title, network.value?.name)
  })
}
