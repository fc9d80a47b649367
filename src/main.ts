import './theme/style-nonce.ts'
import './theme/fonts.css'
import './theme/tokens.css'
import './theme/base.css'
import './theme/controls.css'
import { createPinia } from 'pinia'
import { createApp } from 'vue'
import { whenSignedOut } from '@/api/client'
import { useSessionStore } from '@/stores/session'
import App from './App.vue'
import { fetchFurtherIcons } from './components/base/icons.ts'
import { restoreTheme } from './composables/useTheme.ts'
import { guard } from './router/guards.ts'
import { makeRouter } from './router/index.ts'

restoreTheme()

const app = createApp(App).use(createPinia())
const session = useSessionStore()
const router = makeRouter()

guard(router, { ready: session.load, role: () => session.member?.role })
whenSignedOut(() => {
  if (!session.member) return
  session.forget()
  const { fullPath, name } = router.currentRoute.value
  if (name !== 'sign-in') void router.push({ name: 'sign-in', query: { next: fullPath, ended: '1' } })
})

app.use(router).mount('#app')
fetchFurtherIcons()
