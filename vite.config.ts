import vue from '@vitejs/plugin-vue'
import { fileURLToPath } from 'node:url'
import ElementPlus from 'unplugin-element-plus/vite'
import { defineConfig } from 'vite'

const apiOrigin = process.env['API_ORIGIN'] ?? 'http://127.0.0.1:4310'

export default defineConfig({
  plugins: [vue(), ElementPlus({})],
  resolve: { alias: { '@': fileURLToPath(new URL('./src', import.meta.url)) } },
  build: { outDir: 'dist', sourcemap: false, target: 'es2023', chunkSizeWarningLimit: 700 },
  server: { proxy: { '/api': apiOrigin } },
})
