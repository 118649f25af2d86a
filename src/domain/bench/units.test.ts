import fc from 'fast-check';
import { describe, it } from 'vitest';
import * as units from './units';

const dbm = fc.double({ min: -120, max: 60, noNaN: true });
const load = fc.double({ min: 1, max: 1000, noNaN: true });

const close = (a: number, b: number): boolean =>
  Math.abs(a - b) <= 1e-9 * Math.max(1, Math.abs(a), Math.abs(b));

describe('power units', () => {
  it('come back from dBm and W', () => {
    fc.assert(fc.property(dbm, (level) => close(units.wToDbm(units.dbmToW(level)), level)));
  });

  it('come back through every voltage', () => {
    fc.assert(
      fc.property(dbm, load, (level, loadOhm) => {
        const powerW = units.dbmToW(level);
        const back = [
          units.vRmsToW(units.wToVRms(powerW, loadOhm), loadOhm),
          units.vPkToW(units.wToVPk(powerW, loadOhm), loadOhm),
          units.vPpToW(units.wToVPp(powerW, loadOhm), loadOhm),
        ];
        return back.every((each) => close(each / powerW, 1));
      }),
    );
  });

  it('come back through dBµV', () => {
    fc.assert(
      fc.property(dbm, load, (level, ohm) => close(units.dbUvToDbm(units.dbmToDbUv(level, ohm), ohm), level)),
    );
  });
});
