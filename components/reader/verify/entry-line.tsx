import { WitnessMark } from '@/components/mark/witness-mark';
import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import { alterationCodes } from '@/lib/evidence/codes';
import type { EntryFinding, Finding } from '@/lib/evidence/finding';
import type { LaterLines } from './about-lines';
import { cut } from './cut';
import { checkedWords, deviceWords, lineState } from './entry-checks';
import { EntryTimes } from './entry-times';
import { entryWords } from './finding-words';
import { TechnicalLine } from './technical-line';

export interface EntryLineProps {
  entry: EntryFinding;
  /** The earlier line it is about. */
  about: number | undefined;
  later: LaterLines | undefined;
  isTrusted: boolean;
  names: Finding;
}

/** One line of a log: what it says, what was checked of it, its three times, and what others signed. */
export function EntryLine({ entry, about, later, isTrusted, names }: EntryLineProps) {
  const { seq, leafHash, problems, earliestStamp, deviceSignature } = entry;
  const { title, says, gaps } = entryWords(entry);
  const { mark, words, isWrong } = lineState(entry, later, isTrusted);
  return (
    <li className="grid grid-cols-[3rem_minmax(0,1fr)_5.5rem] border-b border-hair py-3 last:border-b-0">
      <span className="figure pr-2.5 text-right text-xl font-medium text-soft">
        <span className="sr-only">Line </span>
        {seq}
      </span>
      <div className="min-w-0 px-3">
        <p className={later?.struckBy == null ? 'font-semibold' : 'font-semibold line-through'}>
          <UserText>{cut(title)}</UserText>
          {about === undefined ? null : <span className="font-normal text-soft"> about entry {about}</span>}
        </p>
        {later?.struckBy == null ? null : <p className="tone-warn">Struck by entry {later.struckBy}: withdrawn.</p>}
        {says.slice(0, 60).map((line, index) => (
          <p key={index} className="text-[0.9375rem]">
            <UserText isMultiline>{cut(line)}</UserText>
          </p>
        ))}
        {gaps.slice(0, 30).map((line, index) => (
          <p key={index} className="tone-gap text-[0.9375rem]">
            Gap: <UserText>{cut(line)}</UserText>
          </p>
        ))}
        {problems.map((code) => (
          <p key={code} className="tone-gap">
            {alterationCodes[code]}
          </p>
        ))}
        <EntryTimes entry={entry} />
        <p className="tag">{checkedWords(entry)}</p>
        {deviceSignature === null ? null : <p className="text-[0.9375rem]">{deviceWords(deviceSignature, names)}</p>}
        <TechnicalLine>
          <p>
            {entry.kind ?? 'unreadable'}; parts opened: {entry.openedParts.map(({ name }) => name).join(' ') || 'none'}
          </p>
          <Hash value={leafHash} what="leaf hash" />
          {earliestStamp === null ? null : (
            <p className="break-all">
              Earliest time stamp: {earliestStamp.genTime}, serial {earliestStamp.serial}, policy {earliestStamp.policy}
              , on the checkpoint of size {earliestStamp.size}
            </p>
          )}
          {deviceSignature === null ? null : (
            <p className="break-all">Key of the device: SHA-256 {deviceSignature.keyFingerprint}</p>
          )}
        </TechnicalLine>
      </div>
      <div className="flex flex-col items-center gap-1 text-center">
        {mark === null ? null : <WitnessMark state={mark} leafHash={leafHash} title={null} size={48} />}
        <span className={isWrong ? 'tone-gap text-sm' : 'text-sm text-soft'}>{words}</span>
      </div>
    </li>
  );
}
