import type { Metadata } from 'next';
import Link from 'next/link';
import { ServedVerifyTool } from '@/components/reader/verify/served-verify-tool';
import { PublicShell } from '@/components/shell/public-shell';
import { PageHead } from '@/components/ui/page-head';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { version } from '@/lib/version';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Check a packet' };

export default function VerifyPage() {
  const host = new URL(env.url).host;
  return (
    <PublicShell demo={env.isDemo ? 'demo' : 'none'} width="wide">
      <PageHead
        title="Check a packet"
        note="The check runs in this browser; the file is sent nowhere. This page comes from an installation of Witnessmark, which may be the one being checked."
      />
      <ServedVerifyTool host={host} version={version} />
      <p className="tag not-printed mt-10 max-w-[70ch]">
        To depend on no served page at all, check with{' '}
        <a href={paths.verifyPage} download="verify.html" className="link">
          verify.html
        </a>
        , this page as one file that opens from your own disk, or with{' '}
        <a href={paths.verifyProgram} download="verify.mjs" className="link">
          verify.mjs
        </a>{' '}
        in a terminal.{' '}
        <Link href={paths.method} className="link">
          How the record is kept and checked
        </Link>{' '}
        has the SHA-256 of both.
      </p>
    </PublicShell>
  );
}
