import { fileURLToPath } from 'node:url'
import vue from '@vitejs/plugin-vue'
import VueI18n from '@intlify/unplugin-vue-i18n/vite'
import { defineConfig } from 'vite'

// The host stays the browser's: the server compares it with the page's origin.
const server = { target: `http://127.0.0.1:${process.env.PORT ?? 4310}`, changeOrigin: false }

/**
 * What the renter's phone loads lies in two files instead of forty: small files compress badly. Nothing that is built
 * on the component library may be among them.
 */
const phoneFiles = [
  {
    name: 'renter',
    test: /src.(components.renterForm|views.renter|api.forms|layouts.RenterLayout)|shared.(renters|release.(plausible|agesFor))/,
  },
  {
    name: 'base',
    test: /src.(components.(base.fields.(?!BaseDeskSelect)|base.Base(Steps|Button|ActionBar|LocaleSwitch)|base.feedback.(Base(Notice|Problem|Loading)|useProblemText)|base.tones|glyphs|shell.LayoutSlot)|api.(http|commands|ids))|shared.(units.(?!bodySchemas)|dates)/,
  },
]

export default defineConfig({
  plugins: [
    vue(),
    // Messages are compiled here, so that no page carries a message compiler.
    VueI18n({
      include: [fileURLToPath(new URL('./src/i18n/locales/**', import.meta.url))],
      runtimeOnly: true,
      dropMessageCompiler: true,
      fullInstall: false,
    }),
  ],
  build: {
    outDir: 'dist',
    // Lato stays in files of its own: inlined, every page would carry it.
    assetsInlineLimit: (file) => (file.includes('/@fontsource/') ? false : undefined),
    rolldownOptions: {
      output: { codeSplitting: { includeDependenciesRecursively: false, groups: phoneFiles } },
    },
  },
  server: {
    port: 4320,
    proxy: { '/api': server, '/socket.io': { ...server, ws: true } },
  },
})
