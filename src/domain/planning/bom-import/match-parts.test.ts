import { describe, expect, it } from 'vitest';
import { matchParts } from './match-parts';
import { readBom } from './read-bom';

const known = [
  { number: 'R-0805-4K7', value: '4700', footprint: '0805' },
  { number: 'R-0603-4K7', value: '4k7', footprint: '0603' },
  { number: 'C-100N', value: '0.1uF', footprint: '' },
  { number: 'Q-9401', value: 'TN9401', footprint: '' },
];

function linesOf(csv: string) {
  const read = readBom(new TextEncoder().encode(csv));
  if (!read.ok) throw new Error(read.reason);
  return matchParts(read.lines, known);
}

describe('matchParts', () => {
  it('finds a part by its number, and by value and footprint in any spelling', () => {
    const lines = linesOf(
      [
        'Reference,Value,Footprint,MPN',
        '"R1,R2",4.7k,R_0805_2012Metric,',
        'C1,100n,C_0805,',
        'Q1,TN9401,TO-220,',
        'Q2,something,TO-92,q-9401',
      ].join('\n'),
    );
    expect(lines.map(({ match }) => match)).toEqual([
      { number: 'R-0805-4K7', by: 'value' },
      { number: 'C-100N', by: 'value' },
      { number: 'Q-9401', by: 'value' },
      { number: 'Q-9401', by: 'number' },
    ]);
  });

  it('leaves open what fits two parts, or none, and proposes a number that is free', () => {
    const lines = linesOf('Reference,Value\nR1,4k7\nR2,33k\nU1,4066 µA switch\n');
    expect(lines.map(({ match, proposal }) => [match, proposal])).toEqual([
      [null, 'R-4K7'],
      [null, 'R-33K'],
      [null, 'U-4066-UA-SWITCH'],
    ]);
  });

  it('draws rows of one part together and leaves out what is not put in', () => {
    const lines = linesOf('Reference,Value,Footprint,DNP\nR1,4k7,0805,\nR2,4k7,0805,\nR3,4k7,0805,DNP\n');
    expect(lines).toHaveLength(1);
    expect(lines[0]).toMatchObject({ designators: ['R1', 'R2'], quantity: 2 });
  });

  it('never proposes one number twice', () => {
    const lines = linesOf('Reference,Value,Footprint\nR1,33k,axial\nR2,33k,radial\nC1,100n,\n');
    const proposals = lines.filter(({ match }) => match === null).map(({ proposal }) => proposal);
    expect(new Set(proposals).size).toBe(proposals.length);
  });
});
