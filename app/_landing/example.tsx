import { Ledger } from '@/components/ledger/ledger';
import { LedgerLine } from '@/components/ledger/ledger-line';
import { ShortRule } from '@/components/rule/short-rule';
import { SteelRule } from '@/components/rule/steel-rule';
import { Box, Boxes, Sheet } from '@/components/ui/box';
import { Definition } from '@/components/ui/definition';

const receipt = { src: '/example/receipt.svg', kind: 'receipt' } as const;
const drainPlug = { src: '/example/drain-plug.svg', alt: 'Drain plug, drawn', kind: 'photo' } as const;

const changes = {
  first: { at: 1010, title: 'Entry 3, 1,010 mi' },
  second: { at: 5340, title: 'Entry 22, 5,340 mi' },
  third: { at: 10_238, title: 'Entry 28, 10,238 mi' },
};

export function DueExample() {
  return (
    <SteelRule
      label="Example: what is due, by distance"
      unit="mi"
      from={0}
      to={22_000}
      now={14_360}
      flags={[
        { at: 14_360, text: '14,360 now', tone: 'now' },
        { at: 15_384, text: 'warranty ends 14 June', tone: 'limit' },
      ]}
      lanes={[
        {
          label: 'Engine oil',
          done: [changes.first, changes.second, changes.third],
          limit: 15_238,
          dueText: 'in 878 mi, about 5 June',
          intervals: [
            { from: 1010, to: 5340, text: '4,330 mi' },
            { from: 5340, to: 10_238, text: '4,898 mi' },
          ],
        },
        {
          label: 'Primary chaincase',
          done: [changes.first, changes.third],
          limit: 20_238,
          dueText: 'in 5,878 mi',
          intervals: [{ from: 1010, to: 10_238, text: '9,228 mi' }],
        },
        {
          label: 'Gearbox',
          done: [changes.first, changes.third],
          dueText: 'at 30,238 mi',
          intervals: [{ from: 1010, to: 10_238, text: '9,228 mi' }],
        },
      ]}
    />
  );
}

export function WorkExample() {
  return (
    <Sheet className="grid md:grid-cols-2">
      <div className="px-4 pt-3 pb-1 md:border-r md:border-hair">
        <p className="label">Primary chaincase, wet fill</p>
        <p className="figure text-4xl">
          30 <span className="font-text text-2xl font-medium text-soft">US fl oz</span>
        </p>
        <ShortRule
          from={0}
          to={35}
          band={{ min: 29, max: 31 }}
          value={30}
          isMet
          bandText="specified 30"
          valueText="887 mL"
          title="30 US fl oz, as specified"
        />
      </div>
      <div className="border-t border-hair px-4 pt-3 pb-1 md:border-t-0">
        <p className="label">Drain plug torque</p>
        <p className="figure text-4xl">
          19 <span className="font-text text-2xl font-medium text-soft">lbf·ft</span>
        </p>
        <ShortRule
          from={0}
          to={35}
          band={{ min: 14, max: 21 }}
          value={19}
          isMet
          bandText="14 to 21"
          valueText="25.8 N·m"
          title="19 lbf·ft, within 14 to 21"
        />
      </div>
    </Sheet>
  );
}

export function RecordExample() {
  return (
    <Ledger label="Example: three entries of a record, newest first">
      <LedgerLine
        seq={30}
        date="1 Mar 2026"
        dateTime="2026-03-01"
        odometer="13,102 mi"
        title="Front brake pads and fluid"
        detail="No receipt for the pads"
        detailTone="gap"
        thumbs={[{ ...receipt, alt: 'Receipt for the fluid, drawn' }]}
        mark={{ state: 'sealed', leafHash: 'c2b07d15' }}
        words="sealed"
      />
      <LedgerLine
        seq={28}
        date="19 Oct 2025"
        dateTime="2025-10-19"
        odometer="10,238 mi"
        title="Engine oil, primary and gearbox"
        detail="47 days late by time, in time by distance. 4.5 US qt, 30 and 28 US fl oz"
        detailTone="gap"
        thumbs={[{ ...receipt, alt: 'Receipt, front, drawn' }, { ...receipt, alt: 'Receipt, back, drawn' }, drainPlug]}
        mark={{ state: 'countersigned', leafHash: '5f2c41d7' }}
        words="countersigned"
      />
      <LedgerLine
        seq={26}
        date="1 Aug 2025"
        dateTime="2025-08-01"
        odometer="9,120 mi"
        title="Tyre, rear"
        detail="Struck by entry 27 on 2 Aug 2025: logged on the wrong machine"
        mark={{ state: 'struck' }}
        words="struck"
        isStruck
      />
    </Ledger>
  );
}

export function ReaderExample() {
  return (
    <div className="grid gap-6 lg:grid-cols-2 lg:items-start">
      <Definition
        label="Example: reader’s checks of entry 28"
        items={[
          { term: 'Receipt for every fluid and part', detail: 'met' },
          { term: 'Bought before it was used, and enough of it', detail: 'met' },
          { term: 'Grade and quantity as specified', detail: 'met' },
          { term: 'Within the interval', detail: '47 days late by time', tone: 'gap' },
        ]}
      />
      <Boxes columns={2}>
        <Box label="Odometer" isMeasure>
          10,238 mi
        </Box>
        <Box label="Engine oil since entry 22" isMeasure>
          4,898 mi
        </Box>
        <Box label="Countersigned by" note="Inspected the finished work" span="all">
          Halyard Cycle Works
        </Box>
      </Boxes>
    </div>
  );
}
