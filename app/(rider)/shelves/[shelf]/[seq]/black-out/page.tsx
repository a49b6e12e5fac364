import { randomUUID } from 'node:crypto';
import type { Metadata } from 'next';
import { seqFrom } from '@/app/(rider)/seq-from';
import { BlackOutPage } from '@/components/black-out/black-out-page';
import { shelfEntryTitle } from '@/components/shelf/shelf-line';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { picturesToBlackOut } from '@/lib/services/pictures-to-black-out';
import { readShelfEntry } from '@/lib/services/read-shelf-page';
import { blackOutLineAction } from './actions';

export const metadata: Metadata = { title: 'Black out part of a picture' };

interface Props {
  params: Promise<{ shelf: string; seq: string }>;
  searchParams: Promise<{ picture?: string | string[] }>;
}

export default async function BlackOutLinePage({ params, searchParams }: Props) {
  const [{ shelf, seq: asked }, { picture }] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const { pictures } = await orNotFound(picturesToBlackOut({ person, subject: { shelf }, seq }));
  const { entry, name } = await orNotFound(readShelfEntry({ person, shelf, seq }));
  return (
    <>
      <PageHead
        label={<UserText>{`${name}, line ${seq}: ${shelfEntryTitle(entry)}`}</UserText>}
        title="Black out part of a picture"
        note="For a price, a card number or a name that readers are not to see."
        actions={<LinkButton href={paths.shelfEntry(shelf, seq)}>Back to the line</LinkButton>}
      />
      <BlackOutPage
        action={blackOutLineAction}
        hidden={{ shelf, seq: String(seq), key: randomUUID() }}
        name={`line ${seq}`}
        pictures={pictures}
        chosen={typeof picture === 'string' ? picture : undefined}
        file={(sha256, kind) => paths.api.file(sha256, kind, shelf)}
        hrefOf={(copy) => paths.shelfBlackOut(shelf, seq, copy)}
      />
    </>
  );
}
