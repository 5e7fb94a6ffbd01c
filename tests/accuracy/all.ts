import type { OutsideCheck } from './check.ts';
import { SYSTEMS } from './systems.ts';

/** Checks of one kind of thing, under a heading of the table. */
export interface Topic {
  readonly heading: string;
  readonly checks: readonly OutsideCheck[];
}

/** Every figure that is held against the world outside, in the order of the table. */
export const TOPICS: readonly Topic[] = [{ heading: 'System curves and operating points', checks: SYSTEMS }];
