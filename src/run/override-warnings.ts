import { readOverride } from '../case/override.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import type { Warning } from '../problems/warning.ts';

/** A change given beside the case that does nothing, because the case itself says otherwise. */
export function overrideWarnings(
  { file: { hold } }: CaseDocument,
  overrides: readonly string[],
): readonly Warning[] {
  const { gear } = hold;
  const given = overrides.find((text) => readOverride(text).path === 'vehicle.drive.gear');
  if (gear === undefined || given === undefined) return [];
  return [
    {
      code: 'override-without-effect',
      message: `The change ${given} does nothing: the case has hold.gear: ${gear}, which stands over the gear of the vehicle. Change hold.gear.`,
    },
  ];
}
