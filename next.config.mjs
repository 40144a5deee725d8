import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('.', import.meta.url));

const everywhere = [
  { key: 'x-content-type-options', value: 'nosniff' },
  { key: 'referrer-policy', value: 'strict-origin-when-cross-origin' },
  { key: 'permissions-policy', value: 'geolocation=(), microphone=()' },
];
const forEver = [{ key: 'cache-control', value: 'public, max-age=31536000, immutable' }];

/** @type {import('next').NextConfig} */
export default {
  poweredByHeader: false,
  reactStrictMode: true,
  agentRules: false,
  turbopack: { root },
  outputFileTracingRoot: root,
  serverExternalPackages: [
    'sequelize',
    'mariadb',
    'sharp',
    '@node-rs/argon2',
    'piscina',
    'nodemailer',
  ],
  // The fonts' names carry their version.
  headers: async () => [
    { source: '/:path*', headers: everywhere },
    { source: '/fonts/:path*', headers: forEver },
  ],
};
