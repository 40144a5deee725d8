import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('.', import.meta.url));

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
};
