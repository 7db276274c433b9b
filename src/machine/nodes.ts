/** Joins things into nodes: everything joined, directly or by way of others, is one node. */
export class NodeJoiner {
  private readonly parents: number[] = [];

  /** A new node, joined to nothing. */
  add(): number {
    return this.parents.push(this.parents.length) - 1;
  }

  /** The one node standing for all that are joined to this one: the earliest made. */
  find(node: number): number {
    let root = node;
    while (this.parents[root] !== root) root = this.parents[root] as number;
    for (let step = node; step !== root; ) {
      const up = this.parents[step] as number;
      this.parents[step] = root;
      step = up;
    }
    return root;
  }

  join(a: number, b: number): number {
    const [first, second] = [this.find(a), this.find(b)].sort((x, y) => x - y) as [number, number];
    this.parents[second] = first;
    return first;
  }
}
