/** @type {import('next').NextConfig} */
export default {
  // Both load native code or resolve their dialect at run time; bundling breaks them.
  serverExternalPackages: ['sequelize', 'sqlite3'],
  poweredByHeader: false,
  reactStrictMode: true,
}
