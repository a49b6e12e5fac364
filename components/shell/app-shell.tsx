import Link from 'next/link';
import type { ReactNode } from 'react';
import { classes } from '@/components/ui/classes';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import { DemoStrip, type Demo } from './demo-strip';
import { MachineList, OpensBelow, type ShellMachine } from './machine-switcher';
import { barPlaces, spinePlaces, type Place, type PlaceLink } from './places';
import { SkipLink } from './skip-link';
import { Word } from './word';

export type { Demo, Place, ShellMachine };

export interface AppShellProps {
  machine?: ShellMachine | undefined;
  machines: ShellMachine[];
  /** Id of the person's shelf. */
  shelf?: string | undefined;
  /** `shop`: id of the shop the person answers for. */
  person: { name: string; isSteward: boolean; shop?: string | undefined };
  current?: Place | undefined;
  demo: Demo;
  children: ReactNode;
}

/** Spine at the left on a desk; head and bar on a phone. */
export function AppShell(props: AppShellProps) {
  const { current, demo, children } = props;
  return (
    <div className="lg:grid lg:min-h-dvh lg:grid-cols-[13.5rem_minmax(0,1fr)]">
      <SkipLink />
      <Spine {...props} />
      <PhoneHead {...props} />
      <div className="min-w-0">
        <DemoStrip demo={demo} />
        <main
          id="content"
          tabIndex={-1}
          className="mx-auto max-w-[72rem] px-4 pt-5 pb-32 outline-none md:px-9 md:pt-8 lg:mx-0 lg:pb-16 print:p-px"
        >
          {children}
        </main>
      </div>
      <nav
        aria-label="Places at hand"
        className="not-printed fixed inset-x-0 bottom-0 z-20 grid grid-cols-4 border-t border-line bg-sheet pb-[env(safe-area-inset-bottom)] lg:hidden"
      >
        {barPlaces(props).map(({ place, text, href }) => (
          // The garage is a static page of its own, so these are ordinary links.
          <a
            key={place}
            href={href}
            aria-current={place === current ? 'page' : undefined}
            className="flex min-h-14 items-center justify-center border-t-4 border-transparent text-[0.9375rem] font-medium text-soft focus-visible:-outline-offset-3 aria-[current=page]:border-petrol aria-[current=page]:font-semibold aria-[current=page]:text-petrol"
          >
            {text}
          </a>
        ))}
      </nav>
    </div>
  );
}

function Spine(props: AppShellProps) {
  const { machine, machines, person, current } = props;
  return (
    <header className="on-spine not-printed hidden bg-spine text-spine-ink lg:block">
      <div className="sticky top-0 flex h-dvh flex-col overflow-y-auto pt-4 pb-4">
        <div className="px-5">
          <Word href={paths.start} />
        </div>
        {/* A new key closes the list once another machine is shown. */}
        <details key={machine?.id} className="group mt-2 mb-3 border-y border-spine-here">
          <summary className="flex min-h-12 list-none items-center justify-between gap-3 px-5 py-2 leading-tight font-semibold hover:bg-spine-here [&::-webkit-details-marker]:hidden">
            {machine ? <UserText>{machine.name}</UserText> : 'Machines'}
            <OpensBelow />
          </summary>
          <MachineList machine={machine} machines={machines} />
        </details>
        <nav aria-label="Places">
          <PlaceList links={spinePlaces(props)} current={current} />
        </nav>
        <PersonLinks person={person} current={current} className="mt-auto pt-6" />
      </div>
    </header>
  );
}

function PhoneHead(props: AppShellProps) {
  const { machine, machines, person, current } = props;
  const inBar: Place[] = ['bench', 'record'];
  return (
    <header className="on-spine not-printed sticky top-0 z-20 bg-spine text-spine-ink lg:hidden">
      <details key={`${machine?.id} ${current}`} className="group">
        <summary className="flex min-h-14 list-none items-center gap-3 px-4 py-2 [&::-webkit-details-marker]:hidden">
          <span className="figure min-w-0 truncate text-[1.375rem]">
            {machine ? <UserText>{machine.name}</UserText> : 'Witnessmark'}
          </span>
          <OpensBelow />
          <span className="ml-auto text-sm text-spine-soft">All places</span>
        </summary>
        <div className="max-h-[calc(100dvh-7rem)] overflow-y-auto border-t border-spine-here pb-2">
          <MachineList machine={machine} machines={machines} />
          <nav aria-label="All places" className="border-t border-spine-here">
            <PlaceList links={spinePlaces(props).filter(({ place }) => !inBar.includes(place))} current={current} />
          </nav>
          <PersonLinks person={person} current={current} className="border-t border-spine-here pt-2" />
        </div>
      </details>
    </header>
  );
}

function PlaceList({ links, current }: { links: PlaceLink[]; current: Place | undefined }) {
  return (
    <ul>
      {links.map(({ place, text, href }) => (
        <li key={place}>
          <Link
            href={href}
            aria-current={place === current ? 'page' : undefined}
            className={classes(
              'flex min-h-12 items-center px-4 text-[1.0625rem] font-medium lg:min-h-11 lg:px-5',
              place === current
                ? 'lacquer-edge lacquer-edge-thin bg-spine-here pl-6 text-spine-ink lg:pl-7'
                : 'text-spine-soft hover:bg-spine-here hover:text-spine-ink',
            )}
          >
            {text}
          </Link>
        </li>
      ))}
    </ul>
  );
}

function PersonLinks({
  person,
  current,
  className,
}: Pick<AppShellProps, 'person' | 'current'> & { className: string }) {
  const links: PlaceLink[] = [
    ...(person.shop === undefined ? [] : [{ place: 'shop', text: 'Shop', href: paths.shop(person.shop) } as const]),
    { place: 'account', text: 'Account', href: paths.account },
    ...(person.isSteward ? [{ place: 'steward', text: 'Installation', href: paths.steward } as const] : []),
  ];
  return (
    <div className={className}>
      <p className="px-4 pb-1 text-[0.9375rem] text-spine-soft lg:px-5">
        <UserText>{person.name}</UserText>
      </p>
      <PlaceList links={links} current={current} />
    </div>
  );
}
