import type { Metadata } from 'next';
import Link from 'next/link';
import { KeyTable, MarkLegend, MethodSection, StandardsTable, VerifierPart } from '@/components/reader/method-parts';
import { PublicShell } from '@/components/shell/public-shell';
import { PageHead } from '@/components/ui/page-head';
import { whatIsShown } from '@/lib/evidence/format';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { publishedKeys } from '@/lib/services/log-keys';
import { readVerifier } from '@/lib/services/read-verifier';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'How the record is kept and checked' };

export default async function MethodPage() {
  const [program, page] = await Promise.all([readVerifier('verify.mjs'), readVerifier('verify.html')]);
  return (
    <PublicShell demo={env.isDemo ? 'demo' : 'none'} width="wide">
      <PageHead
        title="How the record is kept and checked"
        note="For owners, shops and whoever has to decide on a claim. It explains and does not advise."
      />
      <MethodSection id="record" title="The record">
        <p>
          Every service of a machine is one entry of its record: what was done, with which fluids and parts, in which
          amounts, at which odometer reading, with photos and the receipts of what was used. Entries are numbered from 0
          and stand in the order in which they were sealed. An entry is never edited. What is missing is added by an
          addendum; what is wrong is struck with a reason, and stays readable under a single line.
        </p>
        <p>
          Receipts are sealed too, on the owner’s shelf, when they are confirmed: usually long before the work, and
          before any claim. What was used without a receipt is written down as a gap. The reader’s checks of each entry
          name its gaps, and packets and viewing links state them first.
        </p>
      </MethodSection>
      <MethodSection id="seal" title="The seal">
        <p>
          Sealing writes the server’s time into the entry, links it to the entry before by its hash, and signs a root
          over all entries so far. Change one letter of a sealed entry, leave one out, or put one in, and the root no
          longer fits. The witness mark is the picture of that: the stripe of paint a mechanic draws across a bolt and
          its seat.
        </p>
        <MarkLegend />
      </MethodSection>
      <MethodSection id="times" title="Three times">
        <p>
          <b>Claimed</b>: when the work was done, as its author says. <b>Sealed</b>: when this server took the entry.{' '}
          <b>Proven</b>: no later than the time stamp of an authority that neither the owner nor this installation runs.
          They are never merged. A time stamp of this installation’s own test authority is not independent, and is
          called so.
        </p>
      </MethodSection>
      <MethodSection id="shown" title="What it shows, and what it cannot">
        <p className="border-l-4 border-l-petrol pl-4">{whatIsShown}</p>
        <p>
          “Complete” always means: as of the checkpoint that is named with it. Whoever keeps an older packet, or a mail
          with size and root, can find out whether a newer record still contains it.
        </p>
      </MethodSection>
      <MethodSection id="shops" title="Countersignatures">
        <p>
          A shop can vouch for one entry, in one of four capacities: it did the work, inspected the finished work, was
          present, or checked the papers only. Its statement is an entry of its own and names who invited the shop,
          since when its account exists and whether the steward of this installation has confirmed it. A shop that
          nobody has confirmed could be the owner, and is shown so; whoever runs an installation can confirm a shop on
          it.
        </p>
      </MethodSection>
      <MethodSection id="check" title="Check it yourself">
        <p>
          <Link href={paths.verify} className="link">
            The page for checking
          </Link>{' '}
          runs in your browser and sends nothing, but it is served from here, by the installation that may be the one
          being checked. The same check is below as one file, twice: a page that opens from your own disk and reaches no
          network, and a program that needs nothing but Node. Each can come from anybody you trust: compare its SHA-256.
        </p>
        <VerifierPart program={program.sha256} page={page.sha256} />
      </MethodSection>
      <MethodSection id="keys" title="The keys of this installation">
        <p>
          A key from a file proves only that the file fits itself. Compare the fingerprint with one you got another way:
          it stands in every packet and in every mail about a record.
        </p>
        <KeyTable keys={publishedKeys()} />
        <p>
          The pages of a packet are signed too, with a certificate that its record.json names. A PDF reader calls the
          maker of that signature unknown, unless it is told to trust{' '}
          <a href={paths.api.packetRoot} className="link">
            this installation’s packet root
          </a>
          .
        </p>
      </MethodSection>
      <MethodSection id="format" title="The format">
        <p>
          A packet is a PDF with one file inside, record.json, which is what counts. It holds every line of the
          machine’s log and of the shelves it drew from, in order, with every signed root. Each line names its parts by
          their hashes only, so that a part can be withheld, such as prices or another machine’s purchases, without a
          line going missing: what is withheld is named and counted.
        </p>
        <StandardsTable />
      </MethodSection>
      <MethodSection id="what-is-kept" title="What is kept about you">
        <p>
          Of an account: name, e-mail address, a hash of the password, units and time zone, and the sessions that are
          open. Of a machine: what you enter and upload. Originals of photos are kept as you sent them; readers get a
          copy without place, serial numbers and maker’s notes. A PDF has no such copy and is handed over as it is. Of
          viewing links: only a hash of the address, how often it was opened and when last. No address of a reader’s
          device is kept with a record; to slow down guessing, hashes of such addresses are kept for a day.
        </p>
        <p>
          A sealed line cannot be taken out. Names, VIN, notes, prices and suppliers stand in its parts; the format lets
          a part be erased while its line stays, without what it said. Packets that were handed out stay with whoever
          has them. Cookies are set only to keep you signed in, to know your device again, and to remember that you came
          by a viewing link or an invitation. There are no others.
        </p>
      </MethodSection>
      <MethodSection id="law" title="And the law">
        <p>
          What an owner has to show, and to whom, differs from place to place. In the United States, for one, 15 U.S.C.
          2302(c) and 16 CFR 700.10(c) say that a warranty may not depend on an article or service of a named brand
          unless it is free of charge, and that a warrantor may still deny what it can show the owner’s own part or work
          to have caused. A service contract is not a warranty and goes by its own terms. This is not legal advice; your
          warranty’s text and the law where you live decide.
        </p>
        <p>
          Brakes, steering, wheels, fuel and high-voltage work: if in doubt, leave it to a licensed workshop. A record
          proves no skill.
        </p>
      </MethodSection>
    </PublicShell>
  );
}
