import type { Node } from './fold-in-subset.ts';

/** mg by which the deeper of two nodes may come before the one with the greater bound. */
const TIE = 1;

/** Nodes still to be followed, the greatest bound first; of those that are the same but for a milligram the deepest. */
export class Frontier {
  private readonly heap: Node[] = [];

  get nodes(): readonly Node[] {
    return this.heap;
  }

  push(node: Node): void {
    const { heap } = this;
    let at = heap.length;
    heap.push(node);
    while (at > 0) {
      const parent = (at - 1) >> 1;
      if (rank(heap[parent]) >= rank(node)) break;
      heap[at] = heap[parent] as Node;
      at = parent;
    }
    heap[at] = node;
  }

  pop(): Node | undefined {
    const { heap } = this;
    const top = heap[0];
    const last = heap.pop();
    if (last === undefined || heap.length === 0) return top;
    let at = 0;
    for (;;) {
      let child = 2 * at + 1;
      if (child >= heap.length) break;
      if (rank(heap[child + 1]) > rank(heap[child])) child += 1;
      if (rank(heap[child]) <= rank(last)) break;
      heap[at] = heap[child] as Node;
      at = child;
    }
    heap[at] = last;
    return top;
  }
}

function rank(node: Node | undefined): number {
  return node === undefined ? -Infinity : node.bound.value + Math.min(TIE, node.depth / 1000);
}
