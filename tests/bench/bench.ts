/** One line of `.bench/<name>.json`. */
export interface BenchRow {
  metric: string
  /** Median of the runs. */
  value: number
  unit: string
  /** Median of what it is measured against, in the same unit. */
  yardstick: number
  /** Median of value / yardstick run by run, so that a machine that slows down half way slows both sides of a pair. */
  ratio: number
  /** The least ratio that is good enough. */
  aim: number
  met: boolean
}

export interface Bench {
  /** What is measured against what, in a line. */
  about: string
  run(tell: (line: string) => void): Promise<BenchRow[]>
}

export interface Pair {
  value: number
  yardstick: number
}

/** @param pairs one for each run, each measured right after the other; at least one. */
export function rowFrom(metric: string, unit: string, pairs: readonly Pair[], aim: number): BenchRow {
  const ratio = median(pairs.map(pair => pair.value / pair.yardstick))
  return {
    metric,
    value: median(pairs.map(pair => pair.value)),
    unit,
    yardstick: median(pairs.map(pair => pair.yardstick)),
    ratio,
    aim,
    met: ratio >= aim,
  }
}

/** The middle of the sorted values, or the mean of the two in the middle. @throws RangeError when there are none. */
export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const high = sorted[Math.floor(sorted.length / 2)]
  const low = sorted[Math.floor((sorted.length - 1) / 2)]
  if (high === undefined || low === undefined) throw new RangeError('The median of nothing.')
  return (low + high) / 2
}

export function tableOf(rows: readonly BenchRow[]): string {
  const cells = [
    ['', 'measured', 'yardstick', 'ratio', 'aim', ''],
    ...rows.map(row => [
      row.metric, `${figure(row.value)} ${row.unit}`, `${figure(row.yardstick)} ${row.unit}`, row.ratio.toFixed(2), `≥ ${row.aim}`, row.met ? 'met' : 'MISSED',
    ]),
  ]
  const widths = cells[0]?.map((_, column) => Math.max(...cells.map(line => line[column]?.length ?? 0))) ?? []
  return cells
    .map(line => line.map((cell, column) => column === 0 ? cell.padEnd(widths[column] ?? 0) : cell.padStart(widths[column] ?? 0)).join('  ').trimEnd())
    .join('\n')
}

function figure(value: number): string {
  return value >= 100 ? String(Math.round(value)) : value.toPrecision(3)
}
