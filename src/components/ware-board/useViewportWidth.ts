import { onBeforeUnmount, onMounted, ref } from 'vue'
import type { Ref } from 'vue'

/** Width of the window, px. */
export function useViewportWidth(): Ref<number> {
  const width = ref(window.innerWidth)
  const measure = (): void => {
    width.value = window.innerWidth
  }
  onMounted(() => window.addEventListener('resize', measure))
  onBeforeUnmount(() => window.removeEventListener('resize', measure))
  return width
}
