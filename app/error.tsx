'use client';

import { ErrorWords, type ErrorPageProps } from './_landing/error-words';

export default function ErrorPage(props: ErrorPageProps) {
  return (
    <main className="mx-auto max-w-[36rem] px-4 py-12">
      <ErrorWords {...props} />
    </main>
  );
}
