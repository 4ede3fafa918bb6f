export interface Bounded {
  bound: number;
}

/** What is still to be looked into, the greatest bound first. */
export class NodeHeap<T extends Bounded> {
  private readonly nodes: T[] = [];

  get top(): T | undefined {
    return this.nodes[0];
  }

  push(node: T): void {
    const { nodes } = this;
    let at = nodes.length;
    nodes.push(node);
    while (at > 0) {
      const parent = (at - 1) >> 1;
      if ((nodes[parent] as T).bound >= node.bound) break;
      nodes[at] = nodes[parent] as T;
      at = parent;
    }
    nodes[at] = node;
  }

  pop(): T | undefined {
    const { nodes } = this;
    const top = nodes[0];
    const last = nodes.pop();
    if (last === undefined || nodes.length === 0) return top;
    let at = 0;
    for (;;) {
      let child = 2 * at + 1;
      if (child >= nodes.length) break;
      if (child + 1 < nodes.length && (nodes[child + 1] as T).bound > (nodes[child] as T).bound) child += 1;
      if ((nodes[child] as T).bound <= last.bound) break;
      nodes[at] = nodes[child] as T;
      at = child;
    }
    nodes[at] = last;
    return top;
  }
}
