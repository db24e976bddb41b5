/** Milliseconds of processor time, so that what else the machine does does not count: medians of `turns` turns. */
export function warmMedian(run: () => void, { warm, turns, repeated }: { warm: number; turns: number; repeated: number }): number {
  for (let turn = 0; turn < warm; turn++) run();
  const times = Array.from({ length: turns }, () => {
    const before = process.cpuUsage();
    for (let turn = 0; turn < repeated; turn++) run();
    const { user, system } = process.cpuUsage(before);
    return (user + system) / 1000 / repeated;
  });
  return median(times);
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((left, right) => left - right);
  const middle = (sorted.length - 1) / 2;
  return (sorted[Math.floor(middle)] + sorted[Math.ceil(middle)]) / 2;
}
