import type { Metadata } from 'next';
import Link from 'next/link';
import { pageNumber } from '@/components/account/paging';
import { BuildPacket } from '@/components/proof/build-packet';
import { LinkList } from '@/components/proof/link-list';
import { MakeLink } from '@/components/proof/make-link';
import { PacketList } from '@/components/proof/packet-list';
import { ProofPager } from '@/components/proof/proof-pager';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { listProof } from '@/lib/services/list-proof';
import { whatCanBeOpened } from '@/lib/services/what-can-be-opened';
import { buildPacketAction, makeLinkAction, revokeLinkAction } from './actions';
import { Keepers } from './keepers';

export const metadata: Metadata = { title: 'Proof' };

const perPage = 10;
type Props = {
  params: Promise<{ machine: string }>;
  searchParams: Promise<Record<string, string | string[] | undefined>>;
};

function newsOf(open: number): string {
  if (open === 0) return 'Nobody can read this record but you and those who help you';
  return open === 1 ? 'One viewing link is open' : `${open} viewing links are open`;
}

export default async function ProofPage({ params, searchParams }: Props) {
  const [{ machine: machineId }, query] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const [packetPage, linkPage] = [pageNumber(query.packets), pageNumber(query.links)];
  const openable = await orNotFound(whatCanBeOpened({ person, machineId }));
  const titleOf = (wanted: string) => openable.items.find(({ item }) => item === wanted)?.title;
  const proof = await orNotFound(listProof({ person, machineId, packetPage, linkPage, perPage, titleOf }));
  const forms = { machine: machineId, openable, preview: paths.proofPreview(machineId) };
  const { machine, packets, packetsTotal, links, linksTotal, linksOpen } = proof;
  const zone = machine.timeZone;
  return (
    <>
      <PageHead
        label={<UserText>{machine.name}</UserText>}
        title={newsOf(linksOpen)}
        actions={<LinkButton href={paths.export(machineId)}>Export the whole record</LinkButton>}
      />
      <section aria-labelledby="packets" className="mt-2">
        <h2 id="packets">Packets</h2>
        <p className="mt-1 mb-4 max-w-[70ch]">
          A dated PDF of the record as it stands now, with its gaps, receipts and photos, and the record itself inside
          for anybody to{' '}
          <Link href={paths.verify} className="link">
            check
          </Link>
          . What you keep closed is in neither; every line stays, and what is withheld is counted.
        </p>
        <div className="mb-5 max-w-[36rem]">
          <BuildPacket action={buildPacketAction} {...forms} />
        </div>
        <PacketList packets={packets} zone={zone} />
        <ProofPager
          machine={machineId}
          what="packets"
          page={packetPage}
          other={linkPage}
          perPage={perPage}
          total={packetsTotal}
        />
      </section>
      <section aria-labelledby="links" className="mt-10">
        <h2 id="links">Viewing links</h2>
        <p className="mt-1 mb-4 max-w-[70ch]">
          An address that opens what you choose, read-only, without an account. You see how often it was opened, and can
          revoke it at any moment. Each packet carries a link of its own.
        </p>
        <div className="mb-5 max-w-[36rem]">
          <MakeLink action={makeLinkAction} {...forms} />
        </div>
        <LinkList links={links} zone={zone} revoke={revokeLinkAction} />
        <ProofPager
          machine={machineId}
          what="links"
          page={linkPage}
          other={packetPage}
          perPage={perPage}
          total={linksTotal}
        />
      </section>
      <Keepers machine={machineId} zone={zone} />
    </>
  );
}
