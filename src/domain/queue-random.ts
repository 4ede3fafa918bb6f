/** Numbers that are the same in every run: a linear congruential generator modulo 2³² (Numerical Recipes' constants, from memory). */
export class QueueRandom {
  private state = 20_011;

  /** 0 ≤ x < 1 */
  next(): number {
    this.state = (Math.imul(this.state, 1_664_525) + 1_013_904_223) >>> 0;
    return this.state / 2 ** 32;
  }

  /** Whole, 0 ≤ n < count. */
  below(count: number): number {
    return Math.floor(this.next() * count);
  }

  shuffle<T>(list: T[]): T[] {
    for (let n = list.length - 1; n > 0; n--) {
      const other = this.below(n + 1);
      [list[n], list[other]] = [list[other] as T, list[n] as T];
    }
    return list;
  }
}
