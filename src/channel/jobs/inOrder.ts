/**
 * Runs work of one key one after the other, and that of different keys side by side: a question asked right after a file was dropped
 * must wait for the file.
 */
export function inOrder(): <T>(key: string, work: () => Promise<T>) => Promise<T> {
  const last = new Map<string, Promise<unknown>>();
  return (key, work) => {
    const before = last.get(key) ?? Promise.resolve();
    const result = before.then(work, work);
    const settled = result.then(
      () => undefined,
      () => undefined,
    );
    last.set(key, settled);
    void settled.then(() => {
      if (last.get(key) === settled) last.delete(key);
    });
    return result;
  };
}
