import type { Metadata } from 'next';
import { ImportList } from '@/components/imports/import-list';
import { SendImport } from '@/components/imports/send-import';
import { PageHead } from '@/components/ui/page-head';
import { requirePerson } from '@/lib/auth/session';
import { listImports } from '@/lib/services/read-imported';
import { mostImports } from '@/lib/services/staged-import';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Records from elsewhere' };

export default async function ImportsPage() {
  const person = await requirePerson();
  const imports = await listImports(person);
  return (
    <>
      <PageHead
        title="Records from elsewhere"
        note="Exports of records that another installation keeps, or kept. They are read here and never continued; nobody sees them but you."
      />
      <section aria-labelledby="bring-in" className="max-w-[44rem]">
        <h2 id="bring-in" className="mb-3">
          Bring one in
        </h2>
        <p className="mb-4 max-w-[70ch]">
          The file is sent here and checked, and you see what was found before you decide whether to keep it. A file
          that is not what was sealed is not kept. Up to {mostImports} records, 1 GB each.
        </p>
        <SendImport />
      </section>
      <section aria-labelledby="kept" className="mt-10">
        <h2 id="kept" className="mb-3">
          Kept
        </h2>
        <ImportList imports={imports} zone={person.timeZone} />
      </section>
    </>
  );
}
