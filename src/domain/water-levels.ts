/** One component of a pot: where it should come to, and between what it may. All of one unit, whole. */
export interface Basin {
  goal: bigint;
  floor: bigint;
  ceiling: bigint;
}

/**
 * Levels that add up to `room`: each at λ of its goal, or at its floor or ceiling where λ is beyond it. Exact but for
 * whole units, which the one with the most room takes. Undefined when floors or ceilings do not let the sum be.
 */
export function waterLevels(basins: readonly Basin[], room: bigint): bigint[] | undefined {
  if (basins.some(({ floor, ceiling }) => floor > ceiling)) return undefined;
  if (sum(basins, (basin) => basin.floor) > room || sum(basins, (basin) => basin.ceiling) < room) return undefined;
  const turns = basins
    .flatMap(({ goal, floor, ceiling }) => [floor, ceiling].map((level) => ({ level, goal })))
    .filter(({ goal }) => goal > 0n)
    .sort((a, b) => compare(a.level * b.goal, b.level * a.goal));
  // The last turn of λ at which the levels still fit: from there on the same basins rise together.
  let low = 0;
  let high = turns.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    const { level, goal } = turns[middle] as { level: bigint; goal: bigint };
    if (sum(basins, (basin) => levelAt(basin, level, goal)) <= room) low = middle + 1;
    else high = middle;
  }
  const turn = turns[low - 1] ?? { level: 0n, goal: 1n };
  return topUp(basins, raise(basins, room, turn), room);
}

/** λ = level / goal of some basin. */
function levelAt(basin: Basin, level: bigint, goal: bigint): bigint {
  return clamp((basin.goal * level) / goal, basin);
}

function raise(basins: readonly Basin[], room: bigint, { level, goal }: { level: bigint; goal: bigint }): bigint[] {
  const rises = basins.map(
    (basin) => basin.floor * goal <= basin.goal * level && basin.goal * level < basin.ceiling * goal,
  );
  const fixed = basins.reduce((total, basin, n) => (rises[n] ? total : total + levelAt(basin, level, goal)), 0n);
  const goals = basins.reduce((total, basin, n) => (rises[n] ? total + basin.goal : total), 0n);
  return basins.map((basin, n) =>
    rises[n] && goals > 0n ? clamp((basin.goal * (room - fixed)) / goals, basin) : levelAt(basin, level, goal),
  );
}

/** Whole division loses a unit here and there. */
function topUp(basins: readonly Basin[], levels: bigint[], room: bigint): bigint[] {
  let missing = room - levels.reduce((a, b) => a + b, 0n);
  const byRoom = [...levels.keys()].sort((a, b) => compare(roomOf(basins, levels, b), roomOf(basins, levels, a)));
  for (const n of byRoom) {
    const basin = basins[n] as Basin;
    const level = levels[n] as bigint;
    levels[n] = clamp(level + missing, basin);
    missing -= (levels[n] as bigint) - level;
  }
  return levels;
}

function roomOf(basins: readonly Basin[], levels: readonly bigint[], n: number): bigint {
  return (basins[n] as Basin).ceiling - (levels[n] as bigint);
}

function clamp(level: bigint, { floor, ceiling }: Basin): bigint {
  return level < floor ? floor : level > ceiling ? ceiling : level;
}

function sum(basins: readonly Basin[], of: (basin: Basin) => bigint): bigint {
  return basins.reduce((total, basin) => total + of(basin), 0n);
}

function compare(a: bigint, b: bigint): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
