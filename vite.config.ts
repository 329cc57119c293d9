// One build for everything that runs in production: the pages, the web process and the two worker entries.
import { reactRouter } from '@react-router/dev/vite'
import tailwindcss from '@tailwindcss/vite'
import { defineConfig, type Plugin } from 'vite'

/**
 * Adds the entries that are not pages to the server build.
 *
 * It has to be a plugin: React Router overrides a plain `entryFileNames`. The output is flat, chunks
 * included, because the pool finds its task by `new URL('./engine-worker.js', import.meta.url)`, which
 * holds only while the caller's chunk lies beside it.
 */
function serverEntries(): Plugin {
  return {
    name: 'rowfall:server-entries',
    configEnvironment(name, _config, env) {
      if (name !== 'ssr' || env.command !== 'build') return
      return {
        // fmin has no usable ES module entry of its own, so it is bundled.
        resolve: { noExternal: ['fmin'] },
        build: {
          rollupOptions: {
            input: {
              index: 'virtual:react-router/server-build',
              web: './app/server.ts',
              'engine-worker': './app/jobs/engine-worker.ts',
              'job-worker': './app/jobs/job-worker.ts',
            },
            output: { entryFileNames: '[name].js', chunkFileNames: '[name]-[hash].js' },
          },
        },
      }
    },
  }
}

export default defineConfig({
  plugins: [tailwindcss(), reactRouter(), serverEntries()],
  // Nothing is inlined: the policy lets fonts come from our own origin only, not out of style sheets.
  build: { target: 'es2022', chunkSizeWarningLimit: 6000, reportCompressedSize: false, assetsInlineLimit: 0 },
  // Found late, plotly would make the development server reload the first page that draws a chart.
  optimizeDeps: { include: ['react-plotly.js/factory', 'plotly.js'] },
  server: { watch: { ignored: ['**/.data/**', '**/screenshots/**', '**/tests/**'] } },
})
