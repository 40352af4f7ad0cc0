import { createApp } from 'vue'
import './assets/fonts.css'
import './assets/tokens.css'
import './assets/base.css'
import './assets/print.css'
import App from './App.vue'
import { i18n } from './i18n/i18n'
import { createAppRouter } from './router'

document.documentElement.lang = i18n.global.locale.value

// Nothing of the component library and no store here: the renter's phone loads this file.
const app = createApp(App)
app.use(i18n).use(createAppRouter(app)).mount('#app')
