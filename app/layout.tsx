import type { Metadata, Viewport } from 'next';
import { cookies } from 'next/headers';
import type { ReactNode } from 'react';
import { LookProvider } from '@/lib/client/look';
import { LOOK_COOKIE, readLook, readZone, ZONE_COOKIE } from '@/lib/client/look-cookie';
import './globals.css';

export const metadata: Metadata = {
  title: { default: 'Midfringe', template: '%s – Midfringe' },
  description: 'Fringe spacing and wavelength from camera frames',
};
export const viewport: Viewport = { width: 'device-width', initialScale: 1 };

export default async function RootLayout({ children }: { children: ReactNode }) {
  const jar = await cookies();
  const { theme, goggles } = readLook(jar.get(LOOK_COOKIE)?.value);
  return (
    <html lang="en" data-theme={theme} data-light={goggles ? 'neutral' : 'colour'}>
      <body>
        <LookProvider theme={theme} goggles={goggles} timeZone={readZone(jar.get(ZONE_COOKIE)?.value)}>
          {children}
        </LookProvider>
      </body>
    </html>
  );
}
