'use client';

import { useEffect, useRef } from 'react';
import { HashButton } from '@/components/garage/hash-button';
import { worksheetRoles } from '@/components/garage/photo-roles';
import { Photos } from '@/components/garage/photos';
import { worksheetHash } from '@/components/garage/place';
import { TakePhoto } from '@/components/garage/take-photo';
import { StatusLine } from '@/components/garage/status-line';
import { useDraft, useGarage } from '@/components/garage/garage-context';
import type { OpenDraft } from '@/components/garage/open-draft';
import { Dock } from '@/components/shell/dock';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { procedureFor } from '@/lib/domain/procedures';
import { paths } from '@/lib/paths';
import { ChooseTasks } from './choose-tasks';
import { StartScreen } from './start-screen';
import { SummaryScreen } from './summary-screen';
import { nextScreen, taskProgress, taskTitle } from './task-fields';
import { TaskScreen } from './task-screen';
import { useWorksheet, WorksheetProvider } from './worksheet-context';
import { WorksheetScreens } from './worksheet-screens';

interface WorksheetScreenProps {
  opened: OpenDraft;
  screen: string;
  step: string | undefined;
}

export function WorksheetScreen({ opened, screen, step }: WorksheetScreenProps) {
  const { draft } = useDraft(opened);
  if (draft.state !== 'open') return <Closed opened={opened} />;
  return (
    <WorksheetProvider opened={opened} isAllShown={screen === 'summary'}>
      <Screen opened={opened} screen={screen} step={step} />
    </WorksheetProvider>
  );
}

function Screen({ opened, screen, step }: WorksheetScreenProps) {
  const { worksheet, machine, id } = useWorksheet();
  const task = worksheet.tasks.find((one) => one.id === screen);
  const heading = useRef<HTMLHeadingElement>(null);
  const shown = useRef(screen);
  useEffect(() => {
    if (shown.current === screen) return;
    shown.current = screen;
    window.scrollTo(0, 0);
    heading.current?.focus({ preventScroll: true });
  }, [screen]);
  const names: Record<string, string> = {
    tasks: 'Choose tasks',
    start: 'Odometer and times',
    photos: 'Photos',
    summary: 'Summary',
  };
  return (
    <div className="lg:grid lg:grid-cols-[16rem_minmax(0,1fr)] lg:gap-10">
      <WorksheetScreens current={screen} />
      <div className="min-w-0 pb-20 lg:pb-0">
        <header className="mb-5">
          <p className="label">
            Worksheet, <UserText>{machine?.name ?? 'machine not on this phone'}</UserText>
          </p>
          <h1 ref={heading} tabIndex={-1} className="outline-none">
            {task ? taskTitle(task) : (names[screen] ?? 'Worksheet')}
          </h1>
          <StatusLine opened={opened} />
        </header>
        {task ? <TaskScreen task={task} step={step} /> : <OtherScreen screen={screen} />}
        <Dock>{screen === 'summary' ? <ReviewButton id={id} /> : <NextButton id={id} screen={screen} />}</Dock>
      </div>
    </div>
  );
}

const asFound = () => 'as-found' as const;

function OtherScreen({ screen }: { screen: string }) {
  switch (screen) {
    case 'start':
      return <StartScreen />;
    case 'photos':
      return <Photos roles={worksheetRoles} takeText="Take a photo" nextRole={asFound} />;
    case 'summary':
      return <SummaryScreen />;
    default:
      return <ChooseTasks />;
  }
}

function NextButton({ id, screen }: { id: string; screen: string }) {
  const { worksheet } = useWorksheet();
  const next = nextScreen(worksheet, screen);
  const task = worksheet.tasks.find((one) => one.id === screen);
  const nextPoint = task && taskProgress(task).next;
  const open = task && procedureFor(task.key).holdPoints.find(({ key }) => key === nextPoint);
  return (
    <>
      {task ? <TakePhoto role={open === undefined ? 'as-left' : 'as-found'} /> : null}
      {task && open ? (
        <HashButton size="big" look="main" href={worksheetHash(id, task.id, open.key)}>
          Go on: {open.title.replace(/^./, (letter) => letter.toLowerCase())}
        </HashButton>
      ) : (
        <HashButton size="big" look="main" href={worksheetHash(id, next.screen)}>
          Next: {next.text}
        </HashButton>
      )}
    </>
  );
}

function ReviewButton({ id }: { id: string }) {
  const { view } = useGarage();
  const isAway = view.signal === 'no-signal';
  if (isAway) return <p className="tag py-3">Reviewing and sealing need signal. Everything is kept until then.</p>;
  return (
    <LinkButton size="big" look="main" href={paths.review(id)} prefetch={false}>
      Review and seal
    </LinkButton>
  );
}

function Closed({ opened }: { opened: OpenDraft }) {
  const { draft, unsentCount } = useDraft(opened);
  const entry = draft.sealed ? paths.entry(draft.subject, draft.sealed.seq) : paths.start;
  const left = unsentCount > 0 ? ' What was typed after that is still on this phone; it is not part of the entry.' : '';
  return draft.state === 'sealed' ? (
    <Notice
      title={`Sealed as entry ${draft.sealed?.seq ?? ''}`}
      actions={
        <LinkButton href={entry} prefetch={false}>
          Read the entry
        </LinkButton>
      }
    >
      This worksheet is in the record and can no longer be changed.{left}
    </Notice>
  ) : (
    <Notice title="This worksheet was discarded">It is in no list any more.</Notice>
  );
}
