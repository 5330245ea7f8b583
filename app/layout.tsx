import type { Metadata, Viewport } from 'next';
import { cookies, headers } from 'next/headers';
import { redirect } from 'next/navigation';
import type { ReactNode } from 'react';
import { CANONICAL_HEADER } from '@/app/_security/canonical-address';
import { palettes } from '@/components/ui/tokens';
import { readTheme, THEME_COOKIE } from '@/components/shell/theme';
import './globals.css';

export const metadata: Metadata = {
  title: { default: 'Motebook', template: '%s · Motebook' },
  description: 'A shared laboratory notebook for people who measure how small particles move.',
};

export const viewport: Viewport = {
  themeColor: [
    { media: '(prefers-color-scheme: light)', color: palettes.light.paper },
    { media: '(prefers-color-scheme: dark)', color: palettes.dark.paper },
  ],
};

/** Every page is made for one request: its scripts carry that request's nonce. */
export default async function RootLayout({ children }: { children: ReactNode }) {
  const elsewhere = (await headers()).get(CANONICAL_HEADER);
  if (elsewhere) redirect(elsewhere);
  const theme = readTheme((await cookies()).get(THEME_COOKIE)?.value);
  return (
    <html lang="en" data-theme={theme === 'system' ? undefined : theme}>
      <body>{children}</body>
    </html>
  );
}
