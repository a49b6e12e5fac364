import type { Metadata } from 'next';
import { connection } from 'next/server';
import { PublicShell } from '@/components/shell/public-shell';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';

export const metadata: Metadata = { title: 'Not found' };

export default async function NotFound() {
  // Its scripts carry a nonce, which only a page made for the request can have.
  await connection();
  return (
    <PublicShell demo={env.isDemo ? 'demo' : 'none'}>
      <PageHead label="Not found" title="There is no such page, or it is not shared with you" />
      <p>
        Check the address for a missing letter. If somebody sent you a viewing link, it may have ended: ask them for a
        new one. If this is your machine, sign in with the account it belongs to.
      </p>
      <div className="mt-6 flex flex-wrap gap-3">
        <LinkButton href={paths.start} look="main">
          Go to the bench
        </LinkButton>
        <LinkButton href={paths.home}>Go to the first page</LinkButton>
      </div>
    </PublicShell>
  );
}
