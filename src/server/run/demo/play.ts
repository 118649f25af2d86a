import type { Db, Tx } from '~/server/db/client';
import type { Actor, WriteContext } from '~/server/write';

/** Something that happened in the demo works: when, by whom, and the service calls that it is made of. */
export interface Scene {
  at: Date;
  actor: Actor;
  /** `then` adds what follows from it, at a later moment. */
  play: (w: WriteContext, then: (scene: Scene) => void) => Promise<unknown>;
}

/** Committing each scene alone would take most of the time. */
const scenesPerCommit = 100;

/** Plays scenes in the order of their times; those of the same moment in the order in which they were added. */
export async function play(database: Db, scenes: readonly Scene[]): Promise<void> {
  const waiting = [...scenes].sort((a, b) => b.at.getTime() - a.at.getTime());
  const then = (scene: Scene) => {
    const before = waiting.findLastIndex(({ at }) => at > scene.at);
    waiting.splice(before + 1, 0, scene);
  };
  while (waiting.length > 0) {
    await database.transaction(async (tx) => {
      for (let played = 0; played < scenesPerCommit; played += 1) {
        const scene = waiting.pop();
        if (scene === undefined) return;
        await scene.play(contextOf(tx, scene), then);
      }
    });
  }
}

/** Services called with it join the transaction, and each makes its own entry in the ledger of changes. */
function contextOf(tx: Tx, { actor, at }: Scene): WriteContext {
  const refuse = () => Promise.reject(new Error('A scene of the demo only calls services.'));
  return { tx, actor, now: at, record: refuse, post: refuse };
}
