'use client';

import useSWR from 'swr';
import { ProgressBar } from '@/components/ui/progress-bar';
import { paths } from '@/lib/paths';

/** What `GET /api/packets/<id>` answers. */
export interface PacketShown {
  id: string;
  number: string;
  purpose: string;
  state: 'queued' | 'building' | 'ready' | 'failed';
  stage: string;
  /** 0 to 100. */
  progress: number;
  error: string | null;
  bytes: number | null;
  pages: number | null;
}

const askEveryMilliseconds = 900;
const isUnfinished = ({ state }: PacketShown) => state === 'queued' || state === 'building';

async function readPacket(address: string): Promise<PacketShown> {
  const response = await fetch(address, { headers: { accept: 'application/json' } });
  const answer = (await response.json()) as { packet?: PacketShown; title?: string };
  if (answer.packet === undefined) throw new Error(answer.title ?? 'The packet’s progress could not be read.');
  return answer.packet;
}

const megabytes = (bytes: number) => `${Math.max(0.1, bytes / 1_000_000).toFixed(1)} MB`;

/** A packet being built: asks how far it is until it is ready, then offers the file. */
export function PacketProgress({ initial }: { initial: PacketShown }) {
  const { data, error } = useSWR<PacketShown, Error>(paths.api.packet(initial.id), readPacket, {
    fallbackData: initial,
    // Before the first answer SWR knows nothing; without `initial` a first answer that is no news would end the asking.
    refreshInterval: (shown = initial) => (isUnfinished(shown) ? askEveryMilliseconds : 0),
    revalidateOnFocus: false,
    revalidateOnMount: isUnfinished(initial),
  });
  const packet = data ?? initial;
  return (
    <div aria-live="polite">
      {packet.state === 'ready' ? (
        <ReadyPacket packet={packet} />
      ) : packet.state === 'failed' ? (
        <p className="text-gap">{packet.error ?? 'The packet could not be built. Ask for it again.'}</p>
      ) : (
        <ProgressBar
          label={`Packet ${packet.number}`}
          value={packet.progress}
          max={100}
          text={`${packet.stage}, ${packet.progress} %`}
        />
      )}
      {error === undefined ? null : (
        <p className="text-soft">No answer from the server just now; asking again. The packet goes on being built.</p>
      )}
    </div>
  );
}

function ReadyPacket({ packet }: { packet: PacketShown }) {
  const { number, pages, bytes } = packet;
  const details = [pages === null ? null : `${pages} pages`, bytes === null ? null : megabytes(bytes)];
  return (
    <p>
      <a className="underline decoration-2 underline-offset-4" href={paths.api.packetFile(packet.id)} download>
        Download packet {number}
      </a>{' '}
      <span className="text-soft">{details.filter((detail) => detail !== null).join(', ')}</span>
    </p>
  );
}
