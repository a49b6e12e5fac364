import type { Metadata } from 'next';
import Link from 'next/link';
import { VerifyTool } from '@/components/reader/verify/verify-tool';
import { PublicShell } from '@/components/shell/public-shell';
import { PageHead } from '@/components/ui/page-head';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Check a packet' };

export default function VerifyPage() {
  return (
    <PublicShell demo={env.isDemo ? 'demo' : 'none'} width="wide">
      <PageHead
        title="Check a packet"
        note="The check runs in this browser; the file is sent nowhere. This page itself is served by an installation of Witnessmark, and may be the one being checked."
      />
      <VerifyTool />
      <p className="tag not-printed mt-10 max-w-[70ch]">
        To depend on no served page at all, check with{' '}
        <Link href={paths.method} className="link">
          the one-file program
        </Link>{' '}
        on your own computer.
      </p>
    </PublicShell>
  );
}
