import { fileURLToPath } from 'node:url'
import vue from '@vitejs/plugin-vue'
import VueI18n from '@intlify/unplugin-vue-i18n/vite'
import { defineConfig } from 'vite'

// The host stays the browser's: the server compares it with the page's origin.
const server = { target: `http://127.0.0.1:${process.env.PORT ?? 4310}`, changeOrigin: false }

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
  },
  server: {
    port: 4320,
    proxy: { '/api': server, '/socket.io': { ...server, ws: true } },
  },
})
