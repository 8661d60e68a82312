const EVERYWHERE = [
  { key: 'X-Content-Type-Options', value: 'nosniff' },
  { key: 'Referrer-Policy', value: 'same-origin' },
  { key: 'X-Frame-Options', value: 'DENY' },
  { key: 'Cross-Origin-Opener-Policy', value: 'same-origin' },
  { key: 'Cross-Origin-Resource-Policy', value: 'same-origin' },
  { key: 'Permissions-Policy', value: 'camera=(), microphone=(), geolocation=(), payment=(), usb=(), screen-wake-lock=(self)' },
]

// Answers of the API and files are not pages: opened as one they may show themselves and do nothing. Pages get theirs in proxy.ts.
const NOT_A_PAGE = "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'"
const FILES = [
  '/api/:path*',
  '/_next/static/:path*',
  '/_next/image',
  '/icons/:path*',
  '/pictures/:path*',
  '/favicon.ico',
  '/manifest.webmanifest',
]

/** @type {import('next').NextConfig} */
export default {
  // Both load native code or resolve their dialect at run time; bundling breaks them.
  serverExternalPackages: ['sequelize', 'sqlite3'],
  poweredByHeader: false,
  reactStrictMode: true,
  headers: () => [
    { source: '/:path*', headers: EVERYWHERE },
    ...FILES.map((source) => ({ source, headers: [{ key: 'Content-Security-Policy', value: NOT_A_PAGE }] })),
    {
      source: '/sw.js',
      headers: [
        // A browser asks for it at every visit: an old service worker must not outlive the program that it belongs to.
        { key: 'Cache-Control', value: 'no-cache' },
        // The policy of its script is the policy of the worker, which asks the API.
        { key: 'Content-Security-Policy', value: `${NOT_A_PAGE}; connect-src 'self'` },
      ],
    },
  ],
}
