import preact from '@preact/preset-vite'
import { defineConfig } from 'vite'
import { constants } from 'node:zlib'
import { compression, defineAlgorithm } from 'vite-plugin-compression2'

const page = (path: string) => new URL(`../${path}`, import.meta.url).pathname

/** The page: built into dist/web, compressed once here and not at every request. */
export default defineConfig({
  root: page('src/web'),
  publicDir: false,
  plugins: [
    preact(),
    compression({
      algorithms: [
        'gzip',
        // The highest quality takes six times as long for a twentieth of the size.
        defineAlgorithm('brotliCompress', { params: { [constants.BROTLI_PARAM_QUALITY]: 9 } }),
      ],
      exclude: /\.(br|gz|png)$/,
    }),
  ],
  build: {
    outDir: page('dist/web'),
    emptyOutDir: true,
    target: 'es2022',
    // The map library is one large file that arrives after the first paint.
    chunkSizeWarningLimit: 1500,
  },
  server: { proxy: { '/v1': 'http://127.0.0.1:8080', '/health': 'http://127.0.0.1:8080' } },
})
