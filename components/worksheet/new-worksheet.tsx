'use client';

import { useEffect, useRef, useState } from 'react';
import { worksheetHash } from '@/components/garage/place';
import { useGarage } from '@/components/garage/garage-context';
import type { Garage } from '@/components/garage/garage';
import { mintId } from '@/components/garage/mint-id';
import type { OpenDraft } from '@/components/garage/open-draft';
import type { GarageMachine } from '@/components/garage/snapshot';
import { Button, LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import { localDateOf, localTimeOf } from '@/lib/domain/instants';
import { formatDistance } from '@/lib/domain/units';
import { DraftLine } from '@/components/garage/draft-list';

async function begin(garage: Garage, machine: GarageMachine, id?: string): Promise<void> {
  const opened = await garage.create('worksheet', machine.id, id);
  const at = new Date().toISOString();
  const person = garage.view.snapshot?.person.id;
  await opened.set({
    zone: machine.timeZone,
    recorded: 'at-the-time',
    'startedAt/date': localDateOf(at, machine.timeZone),
    'startedAt/time': localTimeOf(at, machine.timeZone),
    'odometer/unit': machine.odometerUnit,
    'odometer/instrument': String(machine.lastReading?.instrument ?? 0),
    ...(person ? { [`performedBy/${person}/capacity`]: machine.relation } : {}),
  });
  window.location.replace(worksheetHash(opened.view.draft.id, 'tasks'));
}

/** The machine first. A machine with an open worksheet asks whether to go on with it. */
export function NewWorksheet({ machineId }: { machineId: string | undefined }) {
  const { garage, view } = useGarage();
  const machines = view.snapshot?.machines ?? [];
  const machine = machines.find(({ id }) => id === machineId);
  // The one begun here is no reason to ask, in the moment before its own screen opens.
  const [ownId] = useState(() => mintId());
  const open = view.drafts.filter(
    ({ view: { draft } }) =>
      draft.kind === 'worksheet' && draft.state === 'open' && draft.subject === machineId && draft.id !== ownId,
  );
  const isBegun = useRef(false);
  // One begun on another device may still be on its way here.
  const isAwaited =
    view.signal === 'ok' &&
    (view.snapshot?.drafts ?? []).some(
      ({ id, kind, subject }) =>
        kind === 'worksheet' && subject === machineId && !view.drafts.some((one) => one.view.draft.id === id),
    );
  const isFree = machine !== undefined && open.length === 0 && !isAwaited;
  useEffect(() => {
    if (!garage || !machine || !isFree || isBegun.current) return;
    isBegun.current = true;
    void begin(garage, machine, ownId);
  }, [garage, machine, isFree, ownId]);
  if (!garage || isFree || isAwaited) return <p className="tag">Opening a worksheet</p>;
  if (!view.snapshot) return <Unknown />;
  if (machine) return <GoOn garage={garage} machine={machine} open={open} />;
  return (
    <>
      <PageHead title="Which machine?" />
      <ul className="border-t border-line">
        {machines.map((one) => (
          <li key={one.id} className="border-b border-line">
            <a
              href={`#new-worksheet/${one.id}`}
              className="flex min-h-16 flex-wrap items-center justify-between gap-x-4 py-2 text-xl font-semibold text-petrol"
            >
              <UserText>{one.name}</UserText>
              {one.lastReading ? (
                <span className="tag font-normal">last read {formatDistance(one.lastReading)}</span>
              ) : null}
            </a>
          </li>
        ))}
      </ul>
      {machines.length === 0 ? <LinkButton href={paths.newMachine}>Set up a machine</LinkButton> : null}
    </>
  );
}

function GoOn({ garage, machine, open }: { garage: Garage; machine: GarageMachine; open: readonly OpenDraft[] }) {
  return (
    <>
      <PageHead title="A worksheet is open on this machine" label={<UserText>{machine.name}</UserText>} />
      <ul className="mb-5 border-t border-line">
        {open.map((opened) => (
          <DraftLine key={opened.view.draft.id} opened={opened} />
        ))}
      </ul>
      <Button size="big" onClick={() => void begin(garage, machine)}>
        Begin another
      </Button>
    </>
  );
}

function Unknown() {
  return (
    <Notice
      tone="warn"
      title="This phone does not know your machines yet"
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
