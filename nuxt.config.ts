import { addTemplate } from 'nuxt/kit'
import { bundleRuntime } from './scripts/bundle-runtime'
import { callsModule } from './shared/api/calls'
import { contracts } from './shared/api/contracts'
import { cssVariables } from './shared/design/tokens'

/** The one token file as a style sheet. */
function designTokens() {
  addTemplate({ filename: 'tokens.css', getContents: cssVariables, write: true })
}

/** The contracts list as pages call by it, without its schemas. */
function callList() {
  addTemplate({ filename: 'calls.ts', getContents: () => callsModule(contracts), write: true })
}

const browserTests = ['../tests/unit/app', '../tests/unit/map', '../tests/e2e']

export default defineNuxtConfig({
  modules: ['@nuxtjs/tailwindcss', '@pinia/nuxt', 'nuxt-auth-utils', '@nuxt/eslint', designTokens, callList],
  devtools: { enabled: false },
  telemetry: false,
  compatibilityDate: '2026-06-01',
  css: [
    '@fontsource/noto-sans/400.css',
    '@fontsource/noto-sans/600.css',
    '@fontsource/noto-sans-math/400.css',
    '#build/tokens.css',
    '~/assets/css/main.css',
  ],
  // Sessions live in the database; the sealed cookie only names one (server/services/sessions.ts).
  auth: { loadStrategy: 'none' },
  runtimeConfig: {
    session: { name: 'counterpoise-session', maxAge: 14 * 24 * 3600 },
    dataDir: '.data',
    // 'auto': the demo is seeded into an empty database on a loopback host; 'off' never.
    demo: 'auto',
    // NUXT_MAIL_URL, NUXT_MAIL_FROM, NUXT_MAIL_SITE: all three, or no mail is sent.
    mail: { url: '', from: '', site: '' },
  },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      titleTemplate: '%s · Counterpoise',
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/icon.svg' }],
      meta: [{ name: 'viewport', content: 'width=device-width, initial-scale=1' }],
    },
  },
  features: { inlineStyles: false },
  experimental: { appManifest: false },
  tailwindcss: { cssPath: false, viewer: false, exposeConfig: false },
  typescript: {
    strict: true,
    // Tests are checked beside what they test: pages and the browser's here, all others with the server below.
    tsConfig: { include: browserTests.map(folder => `${folder}/**/*`), compilerOptions: { allowImportingTsExtensions: true } },
    sharedTsConfig: { compilerOptions: { allowImportingTsExtensions: true } },
    nodeTsConfig: { compilerOptions: { allowImportingTsExtensions: true } },
  },
  nitro: {
    typescript: { tsConfig: { include: ['../tests/**/*', '../scripts/**/*.ts'], exclude: browserTests, compilerOptions: { allowImportingTsExtensions: true } } },
    preset: 'node-server',
    esbuild: { options: { target: 'node20' } },
    compressPublicAssets: { gzip: true, brotli: true },
    routeRules: {
      '/**': {
        headers: {
          'x-content-type-options': 'nosniff',
          'referrer-policy': 'same-origin',
          'cross-origin-opener-policy': 'same-origin',
          'permissions-policy': 'camera=(), geolocation=(), microphone=()',
        },
      },
      '/tiles/**': { headers: { 'cache-control': 'public, max-age=86400' } },
    },
    externals: { external: ['better-sqlite3', 'nodemailer', 'pdfmake', 'piscina'] },
  },
  vite: {
    build: { chunkSizeWarningLimit: 1500 },
    // Loaded late by pages; named here so that the development server does not reload on first use.
    optimizeDeps: { include: ['maplibre-gl', 'mathjs', 'read-excel-file/universal', 'papaparse', 'd3-scale', 'shapefile', 'proj4', '@tmcw/togeojson', '@xmldom/xmldom', 'fflate', 'sql.js'] },
  },
  hooks: {
    // What a page might ask for later is not fetched ahead: a visitor of one page would pay for the map.
    'build:manifest'(manifest) {
      for (const file of Object.values(manifest)) file.dynamicImports = []
    },
    'nitro:init'(nitro) {
      // Migrations, workers, fonts: what the server reads from disk, laid beside it.
      nitro.hooks.hook(nitro.options.dev ? 'dev:reload' : 'compiled', () => bundleRuntime(nitro))
      if (nitro.options.dev) nitro.hooks.hook('compiled', () => bundleRuntime(nitro))
      // The contracts list types every call; types by route would draw the server's code into the pages' program.
      nitro.hooks.hook('types:extend', (types) => { types.routes = {} })
    },
  },
})
