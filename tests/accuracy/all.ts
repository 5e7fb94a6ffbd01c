import { AFFINITY } from './affinity.ts';
import type { OutsideCheck } from './check.ts';
import { COMPARISONS } from './comparisons.ts';
import { ECONOMICS } from './economics.ts';
import { MACHINES } from './machines.ts';
import { PARALLEL } from './parallel.ts';
import { PIPES } from './pipes.ts';
import { PROFILES } from './profiles.ts';
import { PUMPS } from './pumps.ts';
import { STORAGE } from './storage.ts';
import { SYSTEMS } from './systems.ts';
import { TARIFFS } from './tariffs.ts';
import { TRIMMING } from './trimming.ts';
import { WATER } from './water.ts';

/** Checks of one kind of thing, under a heading of the table. */
export interface Topic {
  readonly heading: string;
  readonly checks: readonly OutsideCheck[];
}

/** Every figure that is held against the world outside, in the order of the table. */
export const TOPICS: readonly Topic[] = [
  { heading: 'System curves and operating points', checks: SYSTEMS },
  { heading: 'Pumps: power, energy, curves', checks: PUMPS },
  { heading: 'Speed', checks: AFFINITY },
  { heading: 'Several pumps, in parallel and in series', checks: PARALLEL },
  { heading: 'Static head, speed and power together', checks: TRIMMING },
  { heading: 'Pipes and fittings', checks: PIPES },
  { heading: 'Water, air and suction', checks: WATER },
  { heading: 'Days of flow', checks: PROFILES },
  { heading: 'Motors, drives, and from wire to water', checks: MACHINES },
  { heading: 'Wet wells: cycles, starts and drawdown tests', checks: STORAGE },
  { heading: 'Tariffs and local time', checks: TARIFFS },
  { heading: 'Life-cycle economics', checks: ECONOMICS },
  { heading: 'Whole comparisons', checks: COMPARISONS },
];
