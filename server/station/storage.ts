/** A wet well or a reservoir: how its volume goes with its level. Levels in m, volumes in m³. */
export interface Storage {
  readonly side: 'suction' | 'discharge';
  /** Volume between start and stop of the first pump, or null where unknown. */
  readonly activeVolume: number | null;
  /** Level and volume, both rising; null where only an active volume is known. */
  readonly table: { readonly levels: readonly number[]; readonly volumes: readonly number[] } | null;
  /** Start and stop level of each duty place, in the order pumps are brought on. */
  readonly levels: readonly { readonly start: number; readonly stop: number }[];
}

/** Volume [m³] at a level: straight lines between the points of the table, the end lines going on beyond it. */
export function volumeAt(table: NonNullable<Storage['table']>, level: number): number {
  const { levels, volumes } = table;
  let i = 1;
  while (i < levels.length - 1 && levels[i]! < level) i++;
  const share = (level - levels[i - 1]!) / (levels[i]! - levels[i - 1]!);
  return volumes[i - 1]! + share * (volumes[i]! - volumes[i - 1]!);
}
