import { units } from '@/lib/domain/units';
import type { UnitCode } from '@/lib/evidence/format';

const options = (codes: readonly UnitCode[]) =>
  codes.map((code) => ({ value: code as string, label: units[code].label }));

/** What figures are shown in; anything may be typed in any unit. */
export const unitOptions = {
  distance: options(['[mi_i]', 'km']),
  volume: options(['[qt_us]', '[foz_us]', 'L', 'mL', '[qt_br]', '[foz_br]']),
  torque: options(['[ft_i].[lbf_av]', '[in_i].[lbf_av]', 'N.m', 'kgf.m']),
};

export const timeZones = [...new Set(['UTC', ...Intl.supportedValuesOf('timeZone')])];
