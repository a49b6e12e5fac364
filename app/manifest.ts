import type { MetadataRoute } from 'next';
import { paths } from '@/lib/paths';

export default function manifest(): MetadataRoute.Manifest {
  return {
    name: 'Witnessmark',
    short_name: 'Witnessmark',
    description: 'A service record for your motorcycle, kept by you and open to anybody’s check.',
    lang: 'en',
    id: '/',
    start_url: paths.start,
    scope: '/',
    display: 'standalone',
    background_color: '#eff2ea',
    theme_color: '#0d4f4c',
    icons: [
      { src: '/icon-192.png', sizes: '192x192', type: 'image/png' },
      { src: '/icon-512.png', sizes: '512x512', type: 'image/png' },
      { src: '/icon-maskable-512.png', sizes: '512x512', type: 'image/png', purpose: 'maskable' },
    ],
    shortcuts: [
      { name: 'Receipt', url: paths.newReceipt },
      { name: 'Worksheet', url: paths.garage },
    ],
  };
}
