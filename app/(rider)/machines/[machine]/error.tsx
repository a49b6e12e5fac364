'use client';

import { ErrorWords, type ErrorPageProps } from '@/app/_landing/error-words';

/** Inside the shell, so that every other place stays at hand. */
export default function ErrorPage(props: ErrorPageProps) {
  return <ErrorWords {...props} />;
}
