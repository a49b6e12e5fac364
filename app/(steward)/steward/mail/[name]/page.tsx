import type { Metadata } from 'next';
import { MailText } from '@/components/account/mail-text';
import { Box, Boxes, Sheet } from '@/components/ui/box';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { authorise, orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import { readMail } from '@/lib/services/list-mail';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Mail' };

export default async function StewardMailMessagePage({ params }: { params: Promise<{ name: string }> }) {
  const person = await requirePerson();
  await authorise({ person, action: 'steward' });
  const { name } = await params;
  const mail = await orNotFound(readMail({ name }));
  return (
    <div className="max-w-[44rem]">
      <PageHead
        label="Mail"
        title={mail.subject}
        actions={<LinkButton href={paths.stewardMail}>Back to the mails</LinkButton>}
      />
      <Boxes columns={3} isOneColumnOnPhone className="mb-5">
        <Box label="To">{mail.to}</Box>
        <Box label="From">{mail.from}</Box>
        <Box label="Written">{formatInstant(mail.at, person.timeZone)}</Box>
      </Boxes>
      <Sheet className="p-4 sm:p-6">
        <MailText text={mail.text} />
      </Sheet>
    </div>
  );
}
