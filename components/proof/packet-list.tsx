import { PacketProgress } from '@/components/packet/packet-progress';
import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { ProofOf } from '@/lib/services/list-proof';

export interface PacketListProps {
  packets: ProofOf['packets'];
  zone: string;
}

/** Packets, newest first; one that is being built says how far it is. */
export function PacketList({ packets, zone }: PacketListProps) {
  if (packets.length === 0) return <p className="tag">No packet has been built yet.</p>;
  return (
    <Sheet>
      <ul role="list" className="divide-y divide-hair">
        {packets.map((packet) => (
          <li
            key={packet.id}
            className="grid gap-x-6 gap-y-1 px-4 py-3 md:grid-cols-[minmax(0,1fr)_minmax(0,1fr)] md:items-center"
          >
            <div className="min-w-0">
              <p className="font-semibold">
                {packet.purpose === '' ? `Packet ${packet.number}` : <UserText>{packet.purpose}</UserText>}
              </p>
              <p className="tag">
                {packet.purpose === '' ? '' : `${packet.number}, `}asked for {formatInstant(packet.createdAt, zone)}
              </p>
              <p className="tag">
                Opens: <UserText>{packet.opens}</UserText>
              </p>
            </div>
            <PacketProgress initial={packet} />
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
