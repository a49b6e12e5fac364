import Link from 'next/link';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';

export interface ShellMachine {
  id: string;
  name: string;
}

export interface MachineSwitcherProps {
  machine?: ShellMachine | undefined;
  machines: ShellMachine[];
}

/** The list inside the head's and the spine's `details`; switching leads to the other machine's bench. */
export function MachineList({ machine, machines }: MachineSwitcherProps) {
  return (
    <ul>
      {machines.map(({ id, name }) => (
        <li key={id}>
          <Link
            href={paths.bench(id)}
            aria-current={id === machine?.id ? 'true' : undefined}
            className="flex min-h-11 items-center px-4 py-2 aria-[current=true]:font-semibold hover:bg-spine-here lg:px-5"
          >
            <UserText>{name}</UserText>
            {id === machine?.id ? <span className="text-spine-soft">, here</span> : null}
          </Link>
        </li>
      ))}
      <li>
        <Link
          href={paths.newMachine}
          className="flex min-h-11 items-center px-4 py-2 text-spine-soft hover:bg-spine-here lg:px-5"
        >
          Set up a machine
        </Link>
      </li>
    </ul>
  );
}

/** A small arrow head that says something opens below. */
export function OpensBelow() {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 12 8"
      width="12"
      height="8"
      className="shrink-0 fill-none stroke-current stroke-2 group-open:rotate-180"
    >
      <path d="M1 1.5 6 6.5 11 1.5" />
    </svg>
  );
}
