/** Runs `work` for 0, 1, 2 … below `count`, never more than `most` at a time. */
export async function runTogether(count: number, most: number, work: (n: number) => Promise<void>): Promise<void> {
  let next = 0;
  const runner = async () => {
    while (next < count) await work(next++);
  };
  await Promise.all(Array.from({ length: most }, runner));
}
