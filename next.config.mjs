/** @type {import('next').NextConfig} */
const config = {
  // Native or single-copy packages stay outside the server bundle: a second copy of yjs would not know the first one's types.
  serverExternalPackages: ['@node-rs/argon2', 'pg', 'yjs', 'canonicalize'],
  poweredByHeader: false,
  productionBrowserSourceMaps: false,
  // The development badge would lie on the menu at the foot of the spine.
  devIndicators: false,
  // Types and lint are checked by `npm run check`; the build only builds.
  typescript: { ignoreBuildErrors: false },
  // On every answer, files of the build included. What differs from answer to answer is set by proxy.ts.
  headers: async () => [
    {
      source: '/:path*',
      headers: [
        { key: 'X-Content-Type-Options', value: 'nosniff' },
        { key: 'Referrer-Policy', value: 'same-origin' },
        { key: 'Cross-Origin-Opener-Policy', value: 'same-origin' },
        { key: 'Cross-Origin-Resource-Policy', value: 'same-origin' },
        {
          key: 'Permissions-Policy',
          value: 'camera=(), microphone=(), geolocation=(), payment=(), usb=(), browsing-topics=()',
        },
      ],
    },
  ],
};

export default config;
