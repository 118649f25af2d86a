import { bandLabel } from '~/domain/bench/bands';
import type { BandKey } from '~/domain/bench/types';
import { bandOption } from '~/domain/bench/plan-template';
import type { PanelSpec } from './panel';

/** The part of a model's address, from its name: `Holm 3 · CW` gives `holm-3-cw`; empty where nothing of it can stand there. */
export function slugOf(name: string): string {
  return plain(name)
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .replaceAll(/^-|-$/g, '')
    .slice(0, 50);
}

/** How a model's serial numbers begin, from its name: the first letter of each word and its figures, `Holm 3` gives `H3`. */
export function serialPrefixOf(name: string): string {
  const words = plain(name)
    .toUpperCase()
    .split(/[^A-Z0-9]+/)
    .filter((word) => word !== '');
  const short = words.map((word) => (/\d/.test(word) ? word : word.charAt(0))).join('');
  return short.slice(0, 8);
}

function plain(name: string): string {
  return name.normalize('NFKD').replaceAll(/\p{M}/gu, '');
}

/** Key of the group of options under which the bands of a model stand where not every rig has every one. */
export const bandGroup = 'bands';

/** A front panel for a model that has no drawing of its own: a dial, a knob and a lamp for each band. */
export function plainPanel(name: string, bands: readonly BandKey[], bandsVary: boolean): PanelSpec {
  const step = Math.min(6, 40 / Math.max(bands.length, 1));
  return {
    name,
    widthMm: 160,
    heightMm: 66,
    nameAt: { x: 9, y: 10 },
    display: { x: 60, y: 8, widthMm: 40, heightMm: 13, text: '--.---.-' },
    knobs: [{ key: 'tuning', label: '', kind: 'tuning', x: 80, y: 42, r: 14 }],
    sockets: [{ key: 'key', label: 'Key', x: 142, y: 42, r: 2.7 }],
    lamps: bands.map((band, index) => ({
      key: bandOption(band),
      label: bandLabel(band).replace(' m', ''),
      x: 13,
      y: 20 + index * step,
      fixed: !bandsVary,
    })),
    callOuts: bandsVary ? [{ key: bandGroup, to: 'tuning', side: 'left', at: 'top' }] : [],
  };
}
