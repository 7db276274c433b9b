/** Puts a value to those of its key. */
export function gather<Key, Value>(map: Map<Key, Value[]>, key: Key, value: Value): void {
  const there = map.get(key);
  if (there) there.push(value);
  else map.set(key, [value]);
}
