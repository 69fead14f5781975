// Settings only. Security headers, session and database settings come from the environment at run time (see DEVELOPERS.md).
export default defineNuxtConfig({
  compatibilityDate: '2025-12-01',
  telemetry: false,
  devtools: { enabled: false },
  // Explicit, so that a folder named app/ can never silently take over as the source folder.
  srcDir: '.',
  modules: [
    '@nuxt/eslint',
    '@pinia/nuxt',
    '@nuxtjs/tailwindcss',
    '@nuxtjs/color-mode',
    '@nuxt/icon',
    'nuxt-auth-utils',
    'nuxt-security',
  ],
  // Our own code is imported by path; auto-import is for the framework only (and for components).
  imports: { scan: false },
  components: [{ path: '~/components', pathPrefix: false }],
  css: ['~/assets/css/fonts.css'],
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      titleTemplate: '%s · Longpull',
      title: 'Longpull',
      meta: [{ name: 'viewport', content: 'width=device-width, initial-scale=1' }],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/icon.svg' }],
    },
  },
  tailwindcss: { exposeConfig: false, viewer: false, cssPath: '~/assets/css/tailwind.css' },
  colorMode: {
    preference: 'system',
    fallback: 'light',
    classSuffix: '',
    storage: 'cookie',
    storageKey: 'longpull-theme',
  },
  icon: {
    provider: 'server',
    fallbackToApi: false,
    serverBundle: { collections: ['lucide'] },
    clientBundle: { scan: true },
  },
  // The page's own session store asks /api/auth/me once; the module's client state would be a second, weaker answer.
  auth: { loadStrategy: 'none', hash: { scrypt: {} } },
  // The nonce policy is for pages; the API sets its few headers itself (server/middleware), which is several times faster.
  security: {
    nonce: true,
    sri: true,
    rateLimiter: false,
    corsHandler: false,
    xssValidator: false,
    requestSizeLimiter: false,
    csrf: false,
    basicAuth: false,
    hidePoweredBy: true,
    headers: {
      crossOriginEmbedderPolicy: false,
      referrerPolicy: 'same-origin',
      // Set in server/middleware where PUBLIC_URL is https; plain http on loopback must not be pinned to https.
      strictTransportSecurity: false,
      contentSecurityPolicy: {
        'default-src': ["'self'"],
        'base-uri': ["'none'"],
        'object-src': ["'none'"],
        'frame-ancestors': ["'none'"],
        'form-action': ["'self'"],
        'script-src': ["'self'", "'nonce-{{nonce}}'", "'strict-dynamic'"],
        'script-src-attr': ["'none'"],
        'style-src': ["'self'", "'unsafe-inline'"],
        'img-src': ["'self'", 'data:', 'blob:'],
        'font-src': ["'self'"],
        'connect-src': ["'self'"],
        'worker-src': ["'self'", 'blob:'],
        'manifest-src': ["'self'"],
        'upgrade-insecure-requests': false,
      },
    },
  },
  routeRules: {
    '/api/**': { security: { headers: false, nonce: false, sri: false } },
    '/livez': { security: { headers: false, nonce: false, sri: false } },
    '/readyz': { security: { headers: false, nonce: false, sri: false } },
  },
  nitro: { compressPublicAssets: true },
  typescript: { strict: true, tsConfig: { compilerOptions: { noUncheckedIndexedAccess: true } } },
  sourcemap: false,
})
