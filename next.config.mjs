/** @type {import('next').NextConfig} */
const config = {
  poweredByHeader: false,
  reactStrictMode: true,
  typedRoutes: false,
  agentRules: false,
  images: { unoptimized: true },
  productionBrowserSourceMaps: false,
  serverExternalPackages: ['pg', 'pg-boss', 'pino', 'nodemailer', 'exceljs', 'kysely', 'mathjs'],
  turbopack: { root: import.meta.dirname },
  outputFileTracingRoot: import.meta.dirname,
  experimental: {
    // Forms carry text only; files go through streaming route handlers, which the proxy does not touch.
    serverActions: { bodySizeLimit: '1mb' },
    proxyClientMaxBodySize: '2mb',
  },
}

export default config
