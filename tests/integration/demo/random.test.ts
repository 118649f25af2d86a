import { expect, test } from 'vitest';
import { batchStories } from '../../../src/server/run/demo/batches';
import { buyerSource } from '../../../src/server/run/demo/buyers';
import { calendarAround } from '../../../src/server/run/demo/calendar';
import { seededRandom } from '../../../src/server/run/demo/random';
import { batchScenes } from '../../../src/server/run/demo/story';

const nobody = { kind: 'system' } as const;
const cast = {
  ...{ owner: nobody, builder: nobody, tester: nobody, shipper: nobody, bookkeeper: nobody, buyer: nobody },
};

/** When each scene of the demo's batches is played. */
function timesOf(seed: number): number[] {
  const random = seededRandom(seed);
  const calendar = calendarAround(new Date('2027-03-09T15:10:00Z'));
  const studio = { calendar, cast, random, nextBuyer: buyerSource(random) };
  return batchStories.flatMap((story) => batchScenes(story, studio).scenes.map(({ at }) => at.getTime()));
}

test('the same seed gives the same half year, another seed another', () => {
  expect(timesOf(7)).toEqual(timesOf(7));
  expect(timesOf(7)).not.toEqual(timesOf(8));
});

test('no scene lies after the present', () => {
  const now = new Date('2027-03-09T15:10:00Z').getTime();
  expect(Math.max(...timesOf(7))).toBeLessThanOrEqual(now);
});

test.each(['00:10', '05:30', '12:00', '23:50'])('nor at %s of the day', (time) => {
  const calendar = calendarAround(new Date(`2027-03-09T${time}:00Z`));
  const random = seededRandom(40_7030);
  const studio = { calendar, cast, random, nextBuyer: buyerSource(random) };
  const late = batchStories
    .flatMap((story) => batchScenes(story, studio).scenes)
    .filter(({ at }) => at > calendar.now);
  expect(late).toEqual([]);
});
