import type { Metadata } from 'next';
import { GaragePage } from '@/components/garage/garage-page';

// Built once and the same for everybody: nothing of a person is in it, so a phone may keep it for working without signal.
export const dynamic = 'force-static';

export const metadata: Metadata = { title: 'Worksheet and receipt' };

export default function Page() {
  return <GaragePage />;
}
