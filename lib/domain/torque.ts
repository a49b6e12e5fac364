import type { Amount, DecimalString, Fastener, UnitCode } from '@/lib/evidence/format';
import { convert, Decimal, decimalText, formatAmount, formatConverted, units } from './units';

export type Band = Fastener['bands'][number];
export interface BandCheck {
  result: 'below' | 'within' | 'above' | 'no-band';
  /** The band that judged: the one printed in the figure's own unit, else the first printed. */
  band?: Band;
  sentence: string;
}

/**
 * The band a figure is judged by: the one printed in its own unit, else the first of its dimension.
 *
 * @example bandFor('N.m', bands) // the N·m band where the manual prints one
 */
export function bandFor(unit: UnitCode, bands: readonly Band[]): Band | undefined {
  return (
    bands.find((band) => band.unit === unit) ??
    bands.find((band) => units[band.unit].dimension === units[unit].dimension)
  );
}

/**
 * A band in words.
 *
 * @example formatBand({ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }) // '14 to 21 lbf·ft'
 */
export function formatBand({ min, max, unit }: Band): string {
  return min === max ? formatAmount({ amount: max, unit }) : `${min} to ${formatAmount({ amount: max, unit })}`;
}

/**
 * Where a torque lies in its band; both ends belong to the band. Judged by the band printed in the figure's own unit,
 * else converted exactly, never rounded.
 *
 * @example checkTorque({ amount: '19', unit: '[ft_i].[lbf_av]' }, [{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }]).result // 'within'
 */
export function checkTorque(torque: Amount, bands: readonly Band[]): BandCheck {
  const band = bandFor(torque.unit, bands);
  if (band === undefined) return { result: 'no-band', sentence: `${formatAmount(torque)}; no band is given.` };
  const value = convert(torque.amount, torque.unit, band.unit);
  const result = value.lt(band.min) ? 'below' : value.gt(band.max) ? 'above' : 'within';
  const shown =
    torque.unit === band.unit
      ? formatAmount(torque)
      : `${formatAmount(torque)} (${formatConverted(torque.amount, torque.unit, band.unit)})`;
  const words = { below: 'below', within: 'within', above: 'above' }[result];
  return { result, band, sentence: `${shown} is ${words} the band of ${formatBand(band)}.` };
}

export interface ExtensionSetting {
  /** Wanted at the fastener, in any torque unit. */
  torque: Amount;
  /** Wrench length, middle of the grip to the drive. Both lengths in one unit. */
  wrenchLength: DecimalString;
  /** Extension, drive to fastener. */
  extensionLength: DecimalString;
  /** Degrees between extension and wrench: 0 straight on, 90 at a right angle, 180 folded back. */
  angleDegrees?: DecimalString;
}

/**
 * What to set a wrench to when an extension moves the fastener out of line with its drive: T·L / (L + E·cos θ), in the
 * torque's unit, to two places. A socket extension in line with the drive needs none of this.
 * Source: FAA AC 43.13-1B chapter 7.
 *
 * @throws RangeError when a length is not above zero, or the extension folds back as far as the grip
 * @example wrenchSetting({ torque: { amount: '135', unit: '[in_i].[lbf_av]' }, wrenchLength: '10', extensionLength: '1.5' }) // 117.39 lbf·in
 */
export function wrenchSetting({ torque, wrenchLength, extensionLength, angleDegrees = '0' }: ExtensionSetting): Amount {
  const length = new Decimal(wrenchLength);
  const extension = new Decimal(extensionLength);
  if (length.lte(0) || extension.lt(0)) throw new RangeError('Enter both lengths; the wrench’s is more than zero.');
  const cosine = exactCosine(angleDegrees) ?? Decimal.acos(-1).times(angleDegrees).div(180).cos();
  const effective = length.plus(extension.times(cosine));
  if (effective.lte(0))
    throw new RangeError('Folded back this far the extension reaches past the grip: no setting is right.');
  return { amount: decimalText(length.times(torque.amount).div(effective).toDecimalPlaces(2)), unit: torque.unit };
}

// The angles people use most, free of the last digit's rounding.
function exactCosine(angleDegrees: DecimalString): Decimal | undefined {
  const cosine = { '0': '1', '60': '0.5', '90': '0', '120': '-0.5', '180': '-1' }[
    new Decimal(angleDegrees).abs().toFixed()
  ];
  return cosine === undefined ? undefined : new Decimal(cosine);
}
