'use client';

import { barlow, barlowCondensed, splineMono } from '@/fonts/screen';
import { ErrorWords, type ErrorPageProps } from './_landing/error-words';
import './globals.css';

export default function GlobalError(props: ErrorPageProps) {
  return (
    <html lang="en" className={`${barlow.variable} ${barlowCondensed.variable} ${splineMono.variable}`}>
      <body>
        <title>Error · Witnessmark</title>
        <main className="mx-auto max-w-[36rem] px-4 py-12">
          <ErrorWords {...props} />
        </main>
      </body>
    </html>
  );
}
