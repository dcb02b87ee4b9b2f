import { mkdirSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { PHASE_PRODUCTION_SERVER } from 'next/constants.js';

const root = fileURLToPath(new URL('.', import.meta.url));
/** Each data folder has its own build; a shared one would be pulled away under a running instance. */
const distDir = process.env.ELLWAND_NEXT_DIST ?? '.next/main';

/**
 * The build adds its own folders to the tsconfig that it is given, so it gets one that is thrown away.
 * Types are checked by `npm run types`, not a second time here.
 */
function throwAwayTsconfig() {
  const path = `${distDir}.tsconfig.json`;
  mkdirSync(new URL('.next/', import.meta.url), { recursive: true });
  writeFileSync(new URL(path, import.meta.url), JSON.stringify({ extends: '../tsconfig.json' }));
  return path;
}

const headers = [
  {
    key: 'Content-Security-Policy',
    // The framework writes its own inline scripts and styles into every page. A nonce would forbid prebuilt pages; what a
    // person types is only ever shown as text, so 'unsafe-inline' opens nothing that escaping does not close.
    value: [
      "default-src 'self'",
      "script-src 'self' 'unsafe-inline'",
      "style-src 'self' 'unsafe-inline'",
      "img-src 'self' data: blob:",
      "font-src 'self'",
      "connect-src 'self'",
      "worker-src 'self' blob:",
      "object-src 'none'",
      "base-uri 'self'",
      "form-action 'self'",
      "frame-ancestors 'none'",
    ].join('; '),
  },
  { key: 'X-Content-Type-Options', value: 'nosniff' },
  { key: 'X-Frame-Options', value: 'DENY' },
  { key: 'Referrer-Policy', value: 'same-origin' },
  { key: 'Cross-Origin-Opener-Policy', value: 'same-origin' },
  { key: 'Permissions-Policy', value: 'camera=(self), microphone=(), geolocation=()' },
];

/** @param {string} phase @returns {import('next').NextConfig} */
export default function config(phase) {
  return {
    distDir,
    poweredByHeader: false,
    reactStrictMode: true,
    serverExternalPackages: ['@node-rs/argon2', 'pg', 'bwip-js'],
    typescript: {
      ignoreBuildErrors: true,
      tsconfigPath: phase === PHASE_PRODUCTION_SERVER ? 'tsconfig.json' : throwAwayTsconfig(),
    },
    turbopack: { root },
    headers: () => Promise.resolve([{ source: '/:path*', headers }]),
  };
}
