const SECURITY_HEADERS = [
  { key: 'X-Content-Type-Options', value: 'nosniff' },
  { key: 'Referrer-Policy', value: 'same-origin' },
  { key: 'X-Frame-Options', value: 'DENY' },
  { key: 'Content-Security-Policy', value: "frame-ancestors 'none'; object-src 'none'; base-uri 'none'; form-action 'self'" },
]

/** @type {import('next').NextConfig} */
export default {
  // Both load native code or resolve their dialect at run time; bundling breaks them.
  serverExternalPackages: ['sequelize', 'sqlite3'],
  poweredByHeader: false,
  reactStrictMode: true,
  headers: () => [
    { source: '/:path*', headers: SECURITY_HEADERS },
    // A browser asks for it at every visit: an old service worker must not outlive the program that it belongs to.
    { source: '/sw.js', headers: [{ key: 'Cache-Control', value: 'no-cache' }] },
  ],
}
