import { formatDbm, formatFrequency, formatNumber } from '~/domain/bench/format';
import { ordinal } from '~/domain/bench/plan-products';
import type { DrawnSweep } from '~/schemas/bench-sweeps';
import type { LimitAt } from './sweep-limits';

interface Props {
  analysis: DrawnSweep['analysis'];
  limitAt: LimitAt;
}

/** What a plot shows, as a table: carrier, harmonics, products by name, floor. */
export function SweepTable({ analysis, limitAt }: Props) {
  const { fundamental, harmonics, others, notCovered, noiseFloorDbm } = analysis;
  const rows = [
    ...harmonics.map((each) => ({ ...each, name: `${ordinal(each.order)} harmonic`, predictedHz: null })),
    ...others.map((each) => ({ ...each, atMost: false })),
  ];
  return (
    <>
      <div className="table-frame mt-2" role="region" aria-label="Products of the sweep" tabIndex={0}>
        <table className="table">
          <caption className="sr-only">Products of the sweep</caption>
          <thead>
            <tr>
              <th scope="col">Product</th>
              {['Frequency', 'Predicted', 'At the meter', 'At the unit', 'Limit'].map((label) => (
                <th key={label} scope="col" className="num">
                  {label}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            <tr>
              <th scope="row">carrier</th>
              <td className="num">{formatFrequency(fundamental.freqHz)}</td>
              <td className="num" />
              <td className="num">{formatDbm(fundamental.levelDbm)}</td>
              <td className="num">{formatDbm(fundamental.unitDbm)}</td>
              <td className="num" />
            </tr>
            {rows.map(({ name, freqHz, predictedHz, meterDbc, unitDbc, atMost }) => (
              <tr key={`${name} ${freqHz}`}>
                <th scope="row">{name}</th>
                <td className="num">{formatFrequency(freqHz)}</td>
                <td className="num">{predictedHz === null ? '' : formatFrequency(predictedHz)}</td>
                <td className="num">
                  {atMost ? '≤ ' : ''}
                  {formatNumber(meterDbc, 1)} dBc
                </td>
                <td className="num">
                  {atMost ? '≤ ' : ''}
                  {formatNumber(unitDbc, 1)} dBc
                </td>
                <td className="num">{limitText(limitAt(freqHz))}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="quiet mt-1">
        Noise floor {formatDbm(noiseFloorDbm)} at the meter.
        {notCovered.length > 0 &&
          ` Not covered: ${notCovered.map(({ order }) => ordinal(order)).join(', ')}.`}
      </p>
    </>
  );
}

function limitText(limitDbc: number | null): string {
  return limitDbc === null ? '' : `${formatNumber(limitDbc, 1)} dBc`;
}
