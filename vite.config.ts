import { fileURLToPath } from 'node:url';
import VueI18nPlugin from '@intlify/unplugin-vue-i18n/vite';
import { quasar, transformAssetUrls } from '@quasar/vite-plugin';
import vue from '@vitejs/plugin-vue';
import { VitePWA } from 'vite-plugin-pwa';
import { defineConfig } from 'vitest/config';
import { readFileSync } from 'node:fs';

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const { version } = JSON.parse(readFileSync(at('./package.json'), 'utf8')) as { version: string };
const alias = { '@shared': at('./shared'), '@': at('./src') };
const define = { __APP_VERSION__: JSON.stringify(version) };

const clientPlugins = () => [
  vue({ template: { transformAssetUrls } }),
  quasar({ sassVariables: at('./src/css/quasar-variables.sass') }),
  VueI18nPlugin({ include: at('./src/i18n/**/*.json'), strictMessage: true, dropMessageCompiler: true }),
];

const pwa = () =>
  VitePWA({
    // Nothing reloads by itself: src/composables/useAppUpdate asks, and never while a run is going.
    registerType: 'prompt',
    injectRegister: false,
    manifest: {
      name: 'Swaymark',
      short_name: 'Swaymark',
      description: 'Time pendulums, correct the period, hand in.',
      start_url: '/',
      display: 'standalone',
      orientation: 'any',
      background_color: '#FAF7F0',
      theme_color: '#0B5C5E',
      icons: [
        { src: '/icons/swaymark-192.png', sizes: '192x192', type: 'image/png' },
        { src: '/icons/swaymark-512.png', sizes: '512x512', type: 'image/png' },
        { src: '/icons/swaymark-maskable-512.png', sizes: '512x512', type: 'image/png', purpose: 'maskable' },
      ],
    },
    workbox: {
      globPatterns: ['**/*.{js,css,html,woff2,svg,png,json,webmanifest}'],
      navigateFallback: '/index.html',
      navigateFallbackDenylist: [/^\/api\//],
      cleanupOutdatedCaches: true,
    },
  });

/** Three builds from one file: the client, the server (`vite build --ssr --mode server`), and the tests. */
export default defineConfig(({ mode }) => {
  if (mode === 'server') {
    return {
      resolve: { alias },
      define,
      build: {
        ssr: true,
        copyPublicDir: false,
        outDir: 'dist/server',
        target: 'node20',
        sourcemap: true,
        rollupOptions: {
          input: {
            index: at('./server/index.ts'),
            demo: at('./server/cli/demo.ts'),
            backup: at('./server/cli/backup.ts'),
            restore: at('./server/cli/restore.ts'),
            'reset-link': at('./server/cli/resetLink.ts'),
          },
        },
      },
    };
  }
  return {
    resolve: { alias },
    define,
    plugins: [...clientPlugins(), ...(process.env.VITEST ? [] : [pwa()])],
    build: { outDir: 'dist/client', target: 'es2022', manifest: true },
    server: { proxy: { '/api': `http://127.0.0.1:${process.env.PORT ?? 4180}` } },
    test: {
      reporters: ['default', at('./tests/support/closingLine.ts')],
      projects: [
        { extends: true, test: { name: 'shared', include: ['tests/shared/**/*.test.ts'], environment: 'node' } },
        {
          extends: true,
          test: { name: 'src', include: ['tests/src/**/*.test.ts'], environment: 'happy-dom', testTimeout: 30_000 },
        },
        {
          extends: true,
          test: { name: 'server', include: ['tests/server/**/*.test.ts'], environment: 'node', testTimeout: 30_000 },
        },
        {
          extends: true,
          test: { name: 'faults', include: ['tests/faults/**/*.test.ts'], environment: 'node', testTimeout: 300_000 },
        },
        {
          extends: true,
          test: {
            name: 'browser',
            include: ['tests/browser/**/*.test.ts'],
            environment: 'node',
            testTimeout: 120_000,
            hookTimeout: 120_000,
            // One Chromium at a time, and after everything else: timing is what these tests are about.
            fileParallelism: false,
            sequence: { groupOrder: 1 },
          },
        },
      ],
    },
  };
});
