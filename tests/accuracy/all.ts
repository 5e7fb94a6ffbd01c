import type { OutsideCheck } from './check.ts';
import { ECONOMICS } from './economics.ts';
import { MACHINES } from './machines.ts';
import { STORAGE } from './storage.ts';
import { SYSTEMS } from './systems.ts';
import { TARIFFS } from './tariffs.ts';

/** Checks of one kind of thing, under a heading of the table. */
export interface Topic {
  readonly heading: string;
  readonly checks: readonly OutsideCheck[];
}

/** Every figure that is held against the world outside, in the order of the table. */
export const TOPICS: readonly Topic[] = [
  { heading: 'System curves and operating points', checks: SYSTEMS },
  { heading: 'Motors, drives, and from wire to water', checks: MACHINES },
  { heading: 'Wet wells: cycles, starts and drawdown tests', checks: STORAGE },
  { heading: 'Tariffs and local time', checks: TARIFFS },
  { heading: 'Life-cycle economics', checks: ECONOMICS },
];
