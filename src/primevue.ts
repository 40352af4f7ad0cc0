import { getCurrentInstance, type App } from 'vue'
import PrimeVue from 'primevue/config'
import { notchwisePreset } from './theme/preset'

const installed = new WeakSet<App>()

/**
 * Brings the component library into the application when the first of our components that is built on it is set up.
 * Screens that use none, the renter's phone above all, never load it.
 */
export function useComponentLibrary() {
  const app = getCurrentInstance()?.appContext.app
  if (!app || installed.has(app)) return
  installed.add(app)
  app.use(PrimeVue, {
    theme: {
      preset: notchwisePreset,
      options: { prefix: 'p', darkModeSelector: '[data-theme=dark]', cssLayer: { name: 'library' } },
    },
  })
}
