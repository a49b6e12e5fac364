'use client';

import { useEffect, useRef } from 'react';
import type { Garage } from '@/components/garage/garage';
import { useGarage } from '@/components/garage/garage-context';
import { mintId } from '@/components/garage/mint-id';
import { LinkButton, Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';

const isUntouched = (field: string): boolean => field === 'zone' || field === 'currency' || field.startsWith('lines/');

async function begin(garage: Garage, shelf: string): Promise<void> {
  const { drafts, snapshot } = garage.view;
  const receipts = drafts.filter(({ view: { draft } }) => draft.kind === 'receipt');
  const untouched = receipts.find(
    ({ view: { draft, fields, files } }) =>
      draft.state === 'open' && draft.subject === shelf && files.length === 0 &&
      !Object.entries(fields).some(([field, text]) => !isUntouched(field) || (field.endsWith('/product') && text !== '')),
  ); // prettier-ignore
  const opened = untouched ?? (await garage.create('receipt', shelf));
  if (!untouched) {
    const currency = receipts.find(({ view }) => view.fields.currency)?.view.fields.currency;
    await opened.set({
      zone: snapshot?.person.timeZone ?? 'UTC',
      ...(currency ? { currency } : {}),
      [`lines/${mintId()}/position`]: '1',
    });
  }
  window.location.replace(`#receipt/${opened.view.draft.id}`);
}

/** Straight to the photo where there is one shelf; else the shelf first. */
export function NewReceipt() {
  const { garage, view } = useGarage();
  const shelves = view.snapshot?.shelves ?? [];
  const only = shelves.length === 1 ? shelves[0] : undefined;
  const isBegun = useRef(false);
  useEffect(() => {
    if (!garage || !only || isBegun.current) return;
    isBegun.current = true;
    void begin(garage, only.id);
  }, [garage, only]);
  if (!garage || only) return <p className="tag">Opening a receipt</p>;
  if (!view.snapshot) {
    return (
      <Notice
        tone="warn"
        title="This phone does not know your shelf yet"
        actions={
          <LinkButton href={paths.signIn} prefetch={false}>
            Sign in
          </LinkButton>
        }
      >
        Open this page once, signed in and with signal. After that it works without.
      </Notice>
    );
  }
  return (
    <>
      <PageHead title="Whose shelf?" />
      <div className="grid gap-2.5">
        {shelves.map(({ id, name }) => (
          <Button key={id} size="big" onClick={() => void begin(garage, id)}>
            <UserText>{name}</UserText>
          </Button>
        ))}
      </div>
      {shelves.length === 0 ? <p className="tag">You have no shelf yet. It comes with your first machine.</p> : null}
    </>
  );
}
