import { accuracyText } from '~/domain/bench/accuracy-text';
import type { measuredQuantities } from '~/domain/bench/measured';
import type { InstrumentSpec } from '~/domain/bench/types';

type Measured = ReturnType<typeof measuredQuantities>[number];

const against = /^(.*), (\d{4}-\d{2}-\d{2})$/;

/** An instrument's specification as the fields of its form hold it; what is not stated is left out. */
export function instrumentValues(
  spec: InstrumentSpec,
  measured: readonly Measured[],
): Partial<Record<string, string>> {
  const { calibration, detector, checkedAgainst } = spec;
  const [, which = checkedAgainst ?? '', on = ''] = against.exec(checkedAgainst ?? '') ?? [];
  const values: Record<string, string | number | null | undefined> = {
    grade: spec.grade,
    checkedAgainst: which,
    checkedOn: on,
    linearityDb: spec.linearityDb,
    flatnessDb: spec.flatnessDb,
    vswr: spec.vswr,
    ownDistortion: spec.ownDistortionDbc === null ? null : -spec.ownDistortionDbc,
    dropV: detector?.dropV,
    tapRatio: detector?.tapRatio,
    calibrationU: calibration?.expanded,
    calibrationUnit: calibration?.unit,
    calibrationK: calibration?.k,
    calibratedOn: calibration?.calibratedOn,
    dueOn: calibration?.dueOn,
    laboratory: calibration?.laboratory,
    certificateNumber: calibration?.certificateNumber,
  };
  for (const of of measured) {
    const stated = spec.quantities[of.key];
    if (stated === undefined) continue;
    values[`accuracy.${of.key}`] = accuracyText(stated.accuracy, of);
    values[`resolution.${of.key}`] =
      stated.resolution === null ? null : accuracyText([stated.resolution], of);
  }
  return Object.fromEntries(
    Object.entries(values).flatMap(([name, value]) =>
      value === null || value === undefined || value === '' ? [] : [[name, String(value)]],
    ),
  );
}

/** What an instrument states, in a line: `Power 0.12 dB; Harmonics and other products 0.6 dB`. */
export function accuracyWords(spec: InstrumentSpec, measured: readonly Measured[]): string {
  return measured
    .flatMap((of) => {
      const stated = spec.quantities[of.key];
      if (stated === undefined) return [];
      const text = accuracyText(stated.accuracy, of);
      return [text === '' ? of.label : `${of.label} ${text}`];
    })
    .join('; ');
}
