import type { EntryFacts, EntryLinks } from '@/components/entry/entry-facts';
import type { ViewedRecord } from '@/lib/services/read-viewing';
import type { RecordView } from '@/lib/services/record-view';

interface ReaderLinks {
  record: RecordView;
  /** The address of a shared copy, for this reader. */
  file: (sha256: string, kind: 'thumb' | 'plate' | 'copy') => string;
  entry?: (seq: number) => string;
}

/** Addresses for somebody without an account: shared copies of pictures, and PDFs, which have no copy, as they are. */
export function readerLinks({ record, file, entry }: ReaderLinks): EntryLinks {
  const attachments = [
    ...record.entries.flatMap((one) => one.attachments),
    ...record.shelves.flatMap(({ purchases }) => purchases.flatMap((one) => one.attachments)),
  ];
  const papers = new Set(
    attachments.filter(({ mediaType }) => mediaType === 'application/pdf').map(({ sha256 }) => sha256),
  );
  return {
    file: (sha256, kind) => {
      if (kind !== 'original') return file(sha256, kind);
      return papers.has(sha256) ? file(sha256, 'copy') : undefined;
    },
    ...(entry === undefined ? {} : { entry }),
  };
}

export function readerFacts({ record, zone }: Pick<ViewedRecord, 'record' | 'zone'>): EntryFacts {
  const { log, termsBySeq, shelves } = record;
  return { zone, log, termsBySeq, purchases: shelves.flatMap(({ purchases }) => purchases) };
}
