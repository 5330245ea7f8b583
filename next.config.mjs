/** @type {import('next').NextConfig} */
const config = {
  // Native or single-copy packages stay outside the server bundle: a second copy of yjs would not know the first one's types.
  serverExternalPackages: ['@node-rs/argon2', 'pg', 'yjs', 'canonicalize'],
  poweredByHeader: false,
  productionBrowserSourceMaps: false,
  // Types and lint are checked by `npm run check`; the build only builds.
  typescript: { ignoreBuildErrors: false },
};

export default config;
