import type { Metadata, Viewport } from 'next';
import type { ReactNode } from 'react';
import { barlow, barlowCondensed, splineMono } from '@/fonts/screen';
import './globals.css';

export const metadata: Metadata = {
  title: { default: 'Witnessmark', template: '%s · Witnessmark' },
  description: 'A service record for your motorcycle, kept by you and open to anybody’s check.',
  applicationName: 'Witnessmark',
  formatDetection: { telephone: false, date: false, address: false, email: false },
  referrer: 'same-origin',
};

export const viewport: Viewport = {
  width: 'device-width',
  initialScale: 1,
  viewportFit: 'cover',
  colorScheme: 'light dark',
  themeColor: [
    { media: '(prefers-color-scheme: light)', color: '#0d4f4c' },
    { media: '(prefers-color-scheme: dark)', color: '#0b2c2a' },
  ],
};

export default function RootLayout({ children }: { children: ReactNode }) {
  return (
    <html lang="en" className={`${barlow.variable} ${barlowCondensed.variable} ${splineMono.variable}`}>
      <body>{children}</body>
    </html>
  );
}
