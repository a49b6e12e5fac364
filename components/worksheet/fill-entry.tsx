'use client';

import { mintId } from '@/components/garage/mint-id';
import { DraftItem, useDraftInScreen, useDraftSet } from '@/components/garage/draft-context';
import { ClearItem, DraftChoice, DraftFigure, DraftText, RemoveItem } from '@/components/garage/draft-fields';
import { Button } from '@/components/ui/button';
import type { FluidPoint } from '@/lib/evidence/format';
import { formatAmount, isUnitCode } from '@/lib/domain/units';
import type { WorksheetFill } from '@/lib/domain/worksheet';
import { DrawEntry } from './draw-entry';
import { FillTotal } from './fill-total';
import { fillTotal, offeredVolumes } from './fill-figures';
import { useWorksheet } from './worksheet-context';

/** First fill plus top-ups, their running total against what is specified, and the lots it came from. */
export function FillEntry({ task, point }: { task: string; point: string }) {
  const { machine, worksheet } = useWorksheet();
  const spec = machine?.terms?.fluidPoints.find((one) => one.point === point);
  const path = `tasks/${task}/fills/${point}`;
  const fill = worksheet.tasks.find(({ id }) => id === task)?.fills.find(({ id }) => id === point);
  const isDryOnly = !spec?.wetFill && spec?.dryFill !== undefined;
  const total = fillTotal(fill?.amounts ?? []);
  return (
    <DraftItem path={path} seed={{ point, fillKind: isDryOnly ? 'dry' : 'wet' }}>
      <fieldset className="space-y-4">
        <legend className="figure mb-2 text-xl">{spec?.title ?? point}, fill</legend>
        <FillAmounts path={path} fill={fill} spec={spec} />
        {spec?.dryFill ? (
          <DraftChoice
            path={`${path}/fillKind`}
            label="Kind of fill"
            hint="Wet: some of the old stays in. Dry: after the case was opened and dried."
            options={[
              { value: 'wet', label: 'Wet fill' },
              { value: 'dry', label: 'Dry fill' },
            ]}
          />
        ) : null}
        <DrawEntry
          item={path}
          kind="fluid"
          title={spec?.title ?? point}
          wanted={total}
          {...(spec?.grade ? { grade: spec.grade } : {})}
        />
        <div className="grid gap-3 sm:grid-cols-2">
          <DraftText path={`${path}/product`} label="Product" />
          <DraftText
            path={`${path}/grade`}
            label="Grade"
            {...(spec?.grade ? { hint: `Specified: ${spec.grade}.` } : {})}
          />
        </div>
        <ClearItem path={path}>Clear this fill</ClearItem>
      </fieldset>
    </DraftItem>
  );
}

interface FillAmountsProps {
  path: string;
  fill: WorksheetFill | undefined;
  spec: FluidPoint | undefined;
}

function FillAmounts({ path, fill, spec }: FillAmountsProps) {
  const { person } = useWorksheet();
  const { view } = useDraftInScreen();
  const setAll = useDraftSet();
  const own = person && isUnitCode(person.volumeUnit) ? person.volumeUnit : 'mL';
  const offered = offeredVolumes(own, spec);
  const usual = spec?.wetFill?.[0]?.unit ?? spec?.dryFill?.[0]?.unit ?? own;
  // The first fill has a fixed key, so that it is one and the same on two phones.
  const topUps = (fill?.amounts ?? []).filter(({ id }) => id !== 'first');
  const firstUnit = view.fields[`${path}/amounts/first/unit`];
  const amountPath = (id: string) => `${path}/amounts/${id}`;
  function addTopUp() {
    const id = mintId();
    setAll({
      [`${amountPath(id)}/step`]: 'top-up',
      [`${amountPath(id)}/unit`]: firstUnit ?? usual,
      [`${amountPath(id)}/position`]: String(topUps.length + 2),
    });
  }
  return (
    <>
      <DraftFigure
        path={`${amountPath('first')}/amount`}
        unitPath={`${amountPath('first')}/unit`}
        usualUnit={usual}
        offered={offered}
        label="First fill"
        {...(spec?.startWith?.[0]
          ? { hint: `Start with ${formatAmount(spec.startWith[0])}, the rest after the level check.` }
          : {})}
      />
      {topUps.map(({ id }, index) => (
        <div key={id} className="border-l-4 border-line pl-3">
          <DraftFigure
            path={`${amountPath(id)}/amount`}
            unitPath={`${amountPath(id)}/unit`}
            usualUnit={usual}
            offered={offered}
            label={`Top-up ${index + 1}`}
          />
          <RemoveItem path={amountPath(id)}>Remove top-up {index + 1}</RemoveItem>
        </div>
      ))}
      <FillTotal fill={fill} spec={spec} total={fillTotal(fill?.amounts ?? [])} />
      <Button size="big" isWide onClick={addTopUp}>
        Add a top-up
      </Button>
    </>
  );
}
