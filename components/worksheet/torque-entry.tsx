'use client';

import { DraftItem, useDraftField } from '@/components/garage/draft-context';
import { ClearItem, DraftFigure, DraftText } from '@/components/garage/draft-fields';
import { ShortRule } from '@/components/rule/short-rule';
import type { UnitCode } from '@/lib/evidence/format';
import { checkTorque, formatBand } from '@/lib/domain/torque';
import { formatConverted, isUnitCode } from '@/lib/domain/units';
import { drawnFigure, readAmount } from './fill-figures';
import { useWorksheet } from './worksheet-context';

const offered: readonly UnitCode[] = ['[ft_i].[lbf_av]', '[in_i].[lbf_av]', 'N.m', 'kgf.m'];
const companion = (unit: UnitCode): UnitCode => (unit === 'N.m' ? '[ft_i].[lbf_av]' : 'N.m');

/** A torque as the wrench was set, judged by the band in words and on the rule. */
export function TorqueEntry({ task, fastener }: { task: string; fastener: string }) {
  const { machine, person } = useWorksheet();
  const spec = machine?.terms?.fasteners.find((one) => one.fastener === fastener);
  const path = `tasks/${task}/torques/${fastener}`;
  const own = spec?.bands[0]?.unit ?? (isUnitCode(person?.torqueUnit ?? '') ? person?.torqueUnit : undefined);
  const title = spec?.title ?? fastener.replaceAll('-', ' ');
  const band = spec?.bands[0];
  return (
    <DraftItem path={path} seed={{ fastener }}>
      <fieldset>
        <legend className="sr-only">{title}</legend>
        <DraftFigure
          path={`${path}/amount`}
          unitPath={`${path}/unit`}
          {...(own ? { usualUnit: own } : {})}
          offered={offered}
          label={`${title}, torque`}
          {...(spec?.sequence ? { hint: `Tighten ${spec.sequence}.` } : {})}
        />
        <TorqueJudgement path={path} bands={spec?.bands ?? []} />
        {band ? null : <p className="tag">The spec sheet has no band for it.</p>}
        <details className="mt-2">
          <summary className="flex min-h-11 items-center font-medium text-petrol underline underline-offset-4">
            The wrench
          </summary>
          <div className="mt-2 grid gap-3 sm:grid-cols-2">
            <DraftText path={`${path}/toolName`} label="Wrench" isOptional />
            <DraftText path={`${path}/toolCalibratedOn`} label="Calibrated on" type="date" isOptional />
          </div>
        </details>
        <ClearItem path={path}>Clear this torque</ClearItem>
      </fieldset>
    </DraftItem>
  );
}

function TorqueJudgement({ path, bands }: { path: string; bands: { min: string; max: string; unit: UnitCode }[] }) {
  const amount = useDraftField(`${path}/amount`).value;
  const unit = useDraftField(`${path}/unit`).value;
  const torque = isUnitCode(unit) ? readAmount({ amount, unit }) : undefined;
  const shown = torque && checkTorque(torque, bands);
  const band = shown?.band ?? bands[0];
  if (!band) return null;
  const ends = { min: Number(band.min), max: Number(band.max) };
  const roomAboveFactor = 1.6;
  return (
    <>
      <ShortRule
        from={0}
        to={ends.max * roomAboveFactor}
        band={ends}
        {...(torque ? { value: drawnFigure(torque, band.unit) } : {})}
        isMet={shown?.result === 'within'}
        bandText={formatBand(band)}
        {...(torque ? { valueText: formatConverted(torque.amount, torque.unit, companion(torque.unit)) } : {})}
        title={torque && shown ? shown.sentence : `Specified: ${formatBand(band)}`}
      />
      {torque && shown && shown.result !== 'within' ? (
        <p role="status" className="tone-warn">
          {shown.sentence}{' '}
          {shown.result === 'no-band' ? '' : 'Check the wrench and the figure; left so, it is sealed as it is.'}
        </p>
      ) : null}
    </>
  );
}
