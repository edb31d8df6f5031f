import '@fontsource-variable/inter/wght.css'
import { createPinia } from 'pinia'
import { createApp } from 'vue'
import App from './App.vue'
import { createAppRouter } from './router/index.ts'
import { useThemeStore } from './stores/theme.ts'
import './styles/tokens.css'
import './styles/element-plus.css'
import './styles/base.css'

const app = createApp(App).use(createPinia())
useThemeStore().apply()
app.use(createAppRouter()).mount('#app')
