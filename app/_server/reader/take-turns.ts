/**
 * One look at a time per key, shared by all who asked before it began: whoever asks gets an answer
 * that was looked up after the question, and a crowd costs two looks, not a thousand.
 */
export function takeTurns<T>(look: (key: string) => Promise<T>): (key: string) => Promise<T> {
  const turns = new Map<string, { now: Promise<T>; next: Promise<T> | null }>();
  const begin = (key: string): Promise<T> => {
    const now = look(key);
    const turn = { now, next: null };
    turns.set(key, turn);
    const end = (): void => {
      if (turns.get(key) === turn && turn.next === null) turns.delete(key);
    };
    now.then(end, end);
    return now;
  };
  return (key) => {
    const turn = turns.get(key);
    if (turn === undefined) return begin(key);
    turn.next ??= turn.now.then(
      () => begin(key),
      () => begin(key),
    );
    return turn.next;
  };
}
