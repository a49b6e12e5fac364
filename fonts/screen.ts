import localFont from 'next/font/local';

export const barlow = localFont({
  src: [
    { path: './Barlow_400Regular.ttf', weight: '400', style: 'normal' },
    { path: './Barlow_500Medium.ttf', weight: '500', style: 'normal' },
    { path: './Barlow_600SemiBold.ttf', weight: '600', style: 'normal' },
  ],
  variable: '--font-barlow',
  display: 'swap',
});

export const barlowCondensed = localFont({
  src: [
    { path: './BarlowCondensed_500Medium.ttf', weight: '500', style: 'normal' },
    { path: './BarlowCondensed_600SemiBold.ttf', weight: '600', style: 'normal' },
  ],
  variable: '--font-barlow-condensed',
  display: 'swap',
  adjustFontFallback: false,
});

/** Hashes stand low on a page: nobody waits for this face. */
export const splineMono = localFont({
  src: [{ path: './SplineSansMono_400Regular.ttf', weight: '400', style: 'normal' }],
  variable: '--font-spline-mono',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
});
