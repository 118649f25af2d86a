import { describe, expect, it } from 'vitest';
import type { PanelSpec } from './panel';
import { litParts } from './panel';

const spec: PanelSpec = {
  name: 'Test rig',
  widthMm: 100,
  heightMm: 50,
  nameAt: { x: 5, y: 8 },
  display: { x: 40, y: 5, widthMm: 30, heightMm: 10, text: '--.---.-' },
  knobs: [
    { key: 'tuning', label: '', x: 50, y: 35, r: 10, kind: 'tuning' },
    { key: 'speed', label: 'Speed', x: 80, y: 35, r: 4, kind: 'pointer', optionKey: 'keyer' },
  ],
  sockets: [{ key: 'key', label: 'Key', x: 90, y: 35, r: 3 }],
  lamps: [
    { key: 'band.40m', label: '40', x: 10, y: 15, text: '7.030.0' },
    { key: 'band.20m', label: '20', x: 10, y: 20, text: '14.060.0' },
  ],
  callOuts: [],
};

describe('litParts', () => {
  it.each([
    { chosen: [], fitted: ['tuning', 'key'], lit: [], active: null, text: '--.---.-' },
    {
      chosen: ['keyer'],
      fitted: ['tuning', 'speed', 'key'],
      lit: [],
      active: null,
      text: '--.---.-',
    },
    {
      chosen: ['band.20m', 'band.40m'],
      fitted: ['tuning', 'key'],
      lit: ['band.40m', 'band.20m'],
      active: 'band.20m',
      text: '14.060.0',
    },
  ])('with $chosen chosen', ({ chosen, fitted, lit, active, text }) => {
    const parts = litParts(spec, new Set(chosen));
    expect([...parts.fitted]).toEqual(fitted);
    expect([...parts.lit]).toEqual(lit);
    expect(parts.activeLamp).toBe(active);
    expect(parts.displayText).toBe(text);
  });

  it('lights a fixed lamp whatever is chosen', () => {
    const fixed: PanelSpec = {
      ...spec,
      lamps: [{ key: 'band.40m', label: '40', x: 10, y: 15, fixed: true }],
    };
    const parts = litParts(fixed, new Set());
    expect([...parts.lit]).toEqual(['band.40m']);
    expect(parts.displayText).toBe('--.---.-');
  });
});
