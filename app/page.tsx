import type { ReactNode } from 'react';
import { WitnessMark } from '@/components/mark/witness-mark';
import { PublicShell } from '@/components/shell/public-shell';
import { LinkButton } from '@/components/ui/button';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { DueExample, ReaderExample, RecordExample, WorkExample } from './_landing/example';

// Its scripts carry a nonce, which only a page made for the request can have.
export const dynamic = 'force-dynamic';

export default function LandingPage() {
  return (
    <PublicShell demo={env.isDemo ? 'demo' : 'none'} width="wide">
      <div className="grid items-center gap-x-12 gap-y-8 md:grid-cols-[minmax(0,1fr)_auto]">
        <div className="max-w-[40rem]">
          <h1 className="text-[clamp(2.25rem,1.6rem+2.6vw,3.5rem)] leading-[1.04]">
            You serviced it yourself. Here is how to show it.
          </h1>
          <p className="mt-4 text-lg">
            Witnessmark keeps the service record of your motorcycle: what was due, what went in, what you bought for it.
            Each service is sealed when it is done, and anybody you show it to can check that nothing was changed since.
          </p>
          <div className="mt-6 flex flex-wrap gap-3">
            <LinkButton href={paths.signUp} look="main" size="big">
              Sign up
            </LinkButton>
            <LinkButton href={paths.signIn} size="big">
              Sign in
            </LinkButton>
            <LinkButton href={paths.verify} look="quiet" size="big">
              Check a packet
            </LinkButton>
          </div>
        </div>
        <MarkExplained />
      </div>

      <p className="tag mt-14 border-t border-line pt-3">
        Below is an example. The machine, the people and the figures are invented, and the pictures are drawn.
      </p>
      <Section title="Engine oil is due in 878 mi, about 5 June" text={texts.due}>
        <DueExample />
      </Section>
      <Section title="30 US fl oz in, the drain plug at 19 lbf·ft" text={texts.work}>
        <WorkExample />
      </Section>
      <Section title="Every service is a line that stays" text={texts.record}>
        <RecordExample />
      </Section>
      <Section title="What a reader finds" text={texts.reader}>
        <ReaderExample />
      </Section>
      <Section title="What it cannot show" text={texts.limits} />
    </PublicShell>
  );
}

const texts = {
  due: 'Odometer readings from anywhere feed one history. Each item of the schedule shows where it was done and where it falls due, by distance and by date, whichever comes first.',
  work: 'The worksheet goes through the job in safe order, in large type, and works without signal. Fills and torques are checked against your manual’s figures as you enter them, in any unit.',
  record:
    'Sealing writes down the time and links the entry to the one before. A mistake is struck, with a reason, and stays readable. A gap is written down as a gap.',
  reader:
    'A dealer, an insurer or a buyer gets a dated packet or a viewing link, with the receipts, the photographs and the checks. They need no account, and no faith in this site, to check it.',
  limits:
    'The record proves that these words and pictures existed in this form at this time, and who said them. It cannot prove that they were true when written. Brakes, steering, wheels, fuel and high voltage: if in doubt, leave the work to a licensed workshop.',
} as const;

function MarkExplained() {
  return (
    <figure className="flex items-center gap-6 md:block md:w-56">
      <WitnessMark state="sealed" leafHash="9f2c41d7" size={152} animate className="max-md:size-28 max-md:shrink-0" />
      <figcaption className="tag md:mt-5">
        A witness mark is the stripe of paint a mechanic draws across a bolt and its seat. If either has moved, the
        stripe no longer lines up.
      </figcaption>
    </figure>
  );
}

function Section({ title, text, children }: { title: string; text: string; children?: ReactNode }) {
  return (
    <section className="mt-10">
      <h2 className="text-[1.75rem]">{title}</h2>
      <p className="mt-1.5 mb-4 max-w-[68ch]">{text}</p>
      {children}
    </section>
  );
}
