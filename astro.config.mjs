// @ts-check
import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import AstroPWA from '@vite-pwa/astro';
import { defineConfig } from 'astro/config';

const directives = [
  "default-src 'self'",
  "img-src 'self' data: blob:",
  "font-src 'self'",
  "connect-src 'self'",
  "worker-src 'self'",
  "manifest-src 'self'",
  "base-uri 'none'",
  "object-src 'none'",
  "form-action 'self'",
  "frame-ancestors 'none'",
];

export default defineConfig({
  output: 'server',
  trailingSlash: 'never',
  build: { format: 'directory' },
  adapter: node({ mode: 'middleware', experimentalStaticHeaders: true }),
  devToolbar: { enabled: false },
  security: { checkOrigin: true, allowedDomains: [{}] },
  experimental: {
    csp: {
      algorithm: 'SHA-256',
      directives: /** @type {never} */ (directives),
      scriptDirective: { resources: ["'self'", "'wasm-unsafe-eval'"] },
      styleDirective: { resources: ["'self'"] },
    },
  },
  integrations: [
    react(),
    AstroPWA({
      strategies: 'injectManifest',
      srcDir: 'src/service-worker',
      filename: 'sw.ts',
      registerType: 'prompt',
      injectRegister: false,
      manifest: {
        name: 'Halfpail',
        short_name: 'Halfpail',
        description: 'Mix, use up leftovers, label, and keep the log.',
        start_url: '/',
        scope: '/',
        display: 'standalone',
        theme_color: '#0d0f11',
        background_color: '#0d0f11',
        icons: [
          { src: '/icon.svg', sizes: 'any', type: 'image/svg+xml', purpose: 'any' },
          { src: '/icon-maskable.svg', sizes: 'any', type: 'image/svg+xml', purpose: 'maskable' },
        ],
      },
      injectManifest: {
        globPatterns: ['**/*.{html,js,css,woff2,svg,webmanifest}'],
        // One failing precache address keeps the worker from installing, silently.
        globIgnores: ['404.html', '500.html', '**/404/**', '**/500/**'],
      },
    }),
  ],
  vite: {
    plugins: [tailwindcss()],
    worker: { format: 'es' },
    optimizeDeps: {
      include: ['barcode-detector/ponyfill', 'qrcode', 'dexie', 'dexie-react-hooks', 'fraction.js', 'minisearch'],
    },
    server: { watch: { ignored: ['**/.data/**', '**/dist/**'] } },
  },
});
