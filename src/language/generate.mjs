// Runs the grammar generator. It groups arrays by a function that Node 20 does not have yet.
Object.groupBy ??= (items, keyOf) => {
  const groups = Object.create(null);
  let index = 0;
  for (const item of items) {
    const key = keyOf(item, index++);
    groups[key] ??= [];
    groups[key].push(item);
  }
  return groups;
};
process.argv.splice(2, 0, "generate");
await import(new URL("../bin/langium.js", import.meta.resolve("langium-cli")));
