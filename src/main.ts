import { createPinia } from 'pinia'
import { VueQueryPlugin } from '@tanstack/vue-query'
import { Quasar } from 'quasar'
import { createApp } from 'vue'
import { httpEvents } from './api/http'
import { makeQueryClient } from './api/queryClient'
import App from './App.vue'
import './assets/main.css'
import { quasarOptions } from './quasar'
import { makeRouter } from './router'
import { useSessionStore } from './stores/session'

const queryClient = makeQueryClient()
const app = createApp(App)
app.use(createPinia())
app.use(Quasar, quasarOptions)
app.use(VueQueryPlugin, { queryClient })

const router = makeRouter()
// A session that ends while a page is open: sign in, then come back to the same place.
httpEvents.addEventListener('sign-in-needed', () => {
  const session = useSessionStore()
  const here = router.currentRoute.value
  if (!session.user || here.meta.public) return
  session.expire()
  void router
    .push({ name: 'sign-in', query: { next: here.fullPath } })
    .then(() => queryClient.clear())
})
app.use(router)
app.mount('#app')
