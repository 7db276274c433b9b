/** Orders designations as a reader expects: `CR2` before `CR10`. The same on every system, whatever its language. */
export function naturalOrder(a: string, b: string): number {
  const left = a.match(/\d+|\D+/g) ?? [];
  const right = b.match(/\d+|\D+/g) ?? [];
  for (let i = 0; i < Math.min(left.length, right.length); i++) {
    const [x, y] = [left[i] as string, right[i] as string];
    if (x === y) continue;
    const difference = /^\d/.test(x) && /^\d/.test(y) ? Number(x) - Number(y) : 0;
    return difference || (x < y ? -1 : 1);
  }
  return left.length - right.length;
}
