import 'server-only';
import { packetsOfMachine } from '@/db/queries/packets';
import { viewingLinksOfMachine, type ViewingLinkRow } from '@/db/queries/viewing-links';
import { machineById } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { scopeWords } from '@/lib/domain/scope-words';
import { readScope } from '@/lib/domain/stored-scope';
import { notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { machineName } from '@/lib/services/list-machines';
import { packetProgress, type PacketProgress } from '@/lib/services/read-packet';

export interface ListedLink {
  id: string;
  label: string;
  state: 'open' | 'revoked' | 'run-out';
  createdAt: string;
  expiresAt: string | null;
  revokedAt: string | null;
  lastOpenedAt: string | null;
  timesOpened: number;
  /** It was minted for a packet and stands in it. */
  isOfPacket: boolean;
  /** What it opens, in words. */
  opens: string;
}
export interface ProofOf {
  machine: { id: string; name: string; timeZone: string };
  packets: (PacketProgress & { opens: string })[];
  packetsTotal: number;
  links: ListedLink[];
  linksTotal: number;
  /** Links that still open the record, those that stand in packets included. */
  linksOpen: number;
}

/** One page each of a machine's packets and viewing links, newest first, for its owner. */
export async function listProof(options: {
  person: PersonRow;
  machineId: string;
  packetPage: number;
  linkPage: number;
  perPage: number;
  /** Names a schedule item by its key. */
  titleOf?: (item: string) => string | undefined;
}): Promise<ProofOf> {
  const { person, machineId, packetPage, linkPage, perPage, titleOf } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const machine = await machineById(machineId);
  if (machine === null) throw notFound('machine');
  const [packets, links] = await Promise.all([packetsOfMachine(machineId), viewingLinksOfMachine(machineId)]);
  const pageOf = <Row>(rows: Row[], page: number) => rows.slice((page - 1) * perPage, page * perPage);
  const at = now().toISOString();
  const opensOf = ({ scope }: { scope: string | null }) => scopeWords(readScope(scope), titleOf);
  const listed = links.map((link) => ({ ...listedLink(link, at), opens: opensOf(link) }));
  return {
    machine: { id: machine.id, name: machineName(machine), timeZone: machine.timeZone },
    packets: pageOf(packets, packetPage).map((packet) => ({ ...packetProgress(packet), opens: opensOf(packet) })),
    packetsTotal: packets.length,
    links: pageOf(listed, linkPage),
    linksTotal: listed.length,
    linksOpen: listed.filter(({ state }) => state === 'open').length,
  };
}

function listedLink(link: ViewingLinkRow, at: string): Omit<ListedLink, 'opens'> {
  const { id, label, createdAt, expiresAt, revokedAt, lastOpenedAt, timesOpened, packetId } = link;
  const hasRunOut = expiresAt !== null && expiresAt <= at;
  const state = revokedAt !== null ? 'revoked' : hasRunOut ? 'run-out' : 'open';
  return {
    id,
    label,
    state,
    createdAt,
    expiresAt,
    revokedAt,
    lastOpenedAt,
    timesOpened,
    isOfPacket: packetId !== null,
  };
}
