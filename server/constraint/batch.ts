/**
 * Gathers the keys asked for during one turn of the event loop and loads them together, so that a
 * list of rows costs one query for each kind of detail. Keep one per request: it remembers what
 * it loaded.
 */
export function batched<K, V>(
  load: (keys: readonly K[]) => Promise<ReadonlyMap<K, V>>,
): (key: K) => Promise<V | undefined> {
  const asked = new Map<K, Promise<V | undefined>>();
  let waiting: K[] = [];
  let turn: Promise<ReadonlyMap<K, V>> | null = null;
  return (key) => {
    const known = asked.get(key);
    if (known) return known;
    waiting.push(key);
    turn ??= new Promise<void>((resolve) => {
      setImmediate(resolve);
    }).then(() => {
      const keys = waiting;
      waiting = [];
      turn = null;
      return load(keys);
    });
    const value = turn.then((values) => values.get(key));
    asked.set(key, value);
    return value;
  };
}

/** One value per request, made when it is first asked for. */
export function perRequest<C extends object, T>(make: (ctx: C) => T): (ctx: C) => T {
  const made = new WeakMap<C, T>();
  return (ctx) => {
    let value = made.get(ctx);
    if (value === undefined) {
      value = make(ctx);
      made.set(ctx, value);
    }
    return value;
  };
}
