import type { PanelSpec } from '~/domain/catalog/panel';

/** One band, 130 mm wide. */
export const voePanel: PanelSpec = {
  name: 'Voe 40',
  widthMm: 130,
  heightMm: 56,
  nameAt: { x: 9, y: 10.6 },
  display: { x: 43, y: 8, widthMm: 38, heightMm: 12.6, text: '7.030.0' },
  knobs: [
    { key: 'af-gain', label: 'AF gain', x: 24, y: 33, r: 5, kind: 'pointer', pointerDeg: -20 },
    { key: 'tuning', label: '', x: 62, y: 37, r: 13, kind: 'tuning' },
    { key: 'speed', label: 'Speed', x: 97, y: 24, r: 4.6, kind: 'pointer', optionKey: 'keyer.built-in' },
  ],
  sockets: [
    { key: 'phones', label: 'Phones', x: 115, y: 20, r: 2.9 },
    { key: 'key', label: 'Key', x: 115, y: 38, r: 2.9 },
  ],
  lamps: [{ key: 'band.40m', label: '40', x: 12.6, y: 18.5, text: '7.030.0', fixed: true }],
  callOuts: [{ key: 'keyer', to: 'key', side: 'right', at: 'bottom' }],
};

/** Three bands out of four, 176 mm wide. */
export const holmPanel: PanelSpec = {
  name: 'Holm 3',
  widthMm: 176,
  heightMm: 66,
  nameAt: { x: 10, y: 10.6 },
  display: { x: 65.5, y: 8.8, widthMm: 44.5, heightMm: 14.8, text: '--.---.-' },
  knobs: [
    { key: 'af-gain', label: 'AF gain', x: 41, y: 22.6, r: 5, kind: 'pointer' },
    { key: 'rf-gain', label: 'RF gain', x: 41, y: 43.4, r: 5, kind: 'pointer', pointerDeg: 40 },
    { key: 'tuning', label: '', x: 88, y: 43.4, r: 15.8, kind: 'tuning' },
    { key: 'width', label: 'Width', x: 136, y: 22.6, r: 5, kind: 'pointer', optionKey: 'filter.narrow' },
    { key: 'speed', label: 'Speed', x: 136, y: 43.4, r: 5, kind: 'pointer', optionKey: 'keyer.built-in' },
  ],
  sockets: [
    { key: 'phones', label: 'Phones', x: 156, y: 22.6, r: 2.9 },
    { key: 'key', label: 'Key', x: 156, y: 43.4, r: 2.9 },
  ],
  lamps: [
    { key: 'band.40m', label: '40', x: 13.8, y: 20.3, text: '7.030.0' },
    { key: 'band.30m', label: '30', x: 13.8, y: 26.8, text: '10.116.0' },
    { key: 'band.20m', label: '20', x: 13.8, y: 33.2, text: '14.060.0' },
    { key: 'band.15m', label: '15', x: 13.8, y: 39.7, text: '21.060.0' },
  ],
  callOuts: [
    { key: 'bands', to: 'band.40m', side: 'left', at: 'top' },
    { key: 'filter', to: 'width', side: 'right', at: 'top' },
    { key: 'keyer', to: 'key', side: 'right', at: 'bottom' },
  ],
};

const skerryLamps = [
  ['40', '7.030.0'],
  ['30', '10.116.0'],
  ['20', '14.060.0'],
  ['17', '18.086.0'],
  ['15', '21.060.0'],
] as const;

/** Five bands, 200 mm wide. */
export const skerryPanel: PanelSpec = {
  name: 'Skerry 5',
  widthMm: 200,
  heightMm: 72,
  nameAt: { x: 10, y: 10.8 },
  display: { x: 72, y: 9, widthMm: 56, heightMm: 17, text: '--.---.-' },
  knobs: [
    { key: 'af-gain', label: 'AF gain', x: 44, y: 22, r: 5.2, kind: 'pointer', pointerDeg: -30 },
    { key: 'rf-gain', label: 'RF gain', x: 44, y: 48, r: 5.2, kind: 'pointer', pointerDeg: 25 },
    { key: 'tuning', label: '', x: 100, y: 48, r: 17, kind: 'tuning' },
    { key: 'width', label: 'Width', x: 146, y: 22, r: 5.2, kind: 'pointer', optionKey: 'filter.narrow' },
    { key: 'speed', label: 'Speed', x: 146, y: 48, r: 5.2, kind: 'pointer', optionKey: 'keyer.built-in' },
    { key: 'power', label: 'Power', x: 166, y: 48, r: 5.2, kind: 'pointer', pointerDeg: 60 },
  ],
  sockets: [
    { key: 'phones', label: 'Phones', x: 183, y: 22, r: 3 },
    { key: 'key', label: 'Key', x: 183, y: 48, r: 3 },
  ],
  lamps: skerryLamps.map(([label, text], index) => ({
    key: `band.${label}m`,
    label,
    x: 14,
    y: 21 + index * 7,
    text,
    fixed: true,
  })),
  callOuts: [
    { key: 'filter', to: 'width', side: 'left', at: 'top' },
    { key: 'keyer', to: 'key', side: 'right', at: 'bottom' },
  ],
};
