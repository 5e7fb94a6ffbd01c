import { closeSync, openSync, writeSync } from 'node:fs';
import type { Pump } from '../../server/hydraulics/pump.ts';
import type { Comparison } from '../../server/staging/compare.ts';
import type { RuleId } from '../../server/staging/result.ts';
import { type Action, meanPower, type State } from '../../server/staging/state.ts';
import { isoUtc } from '../../server/time.ts';

const HEADER = 'time,rule,flow_m3s,static_head_m,low,high,share,speed,power_kw,low_set,high_set\n';
const CHUNK = 1 << 20;

/** Writes what each rule does in each interval, as it is worked out; a year of minutes never lies in memory whole. */
export class IntervalsFile {
  private readonly file: number;
  private text = HEADER;

  constructor(path: string) {
    this.file = openSync(path, 'w');
  }

  add(
    rule: RuleId,
    record: Comparison['record'],
    duty: readonly Pump[],
    standby: number,
    i: number,
    action: Action,
  ): void {
    const { low, high, share } = action;
    const head = typeof record.staticHead === 'number' ? record.staticHead : record.staticHead[i]!;
    const power = (meanPower(action) + standby) / 1000;
    this.text += `${isoUtc(record.startMs[i]!)},${rule},${record.flow[i]},${head},${low.count},${high.count},${share},${high.speed},${power},${setAtSpeeds(low, duty)},${setAtSpeeds(high, duty)}\n`;
    if (this.text.length > CHUNK) this.flush();
  }

  close(): void {
    this.flush();
    closeSync(this.file);
  }

  private flush(): void {
    writeSync(this.file, this.text);
    this.text = '';
  }
}

/** `A@0.93+J@1`: the pumps that run, each with its share of rated speed. */
function setAtSpeeds(state: State, duty: readonly Pump[]): string {
  const names = duty.filter((_, i) => Math.floor(state.set / 2 ** i) % 2 === 1).map((pump) => pump.name);
  const speeds = state.running.flatMap((r) => new Array<number>(r.count).fill(r.onDrive ? r.speed : 1));
  return names.map((name, i) => `${name}@${Number(speeds[i]!.toFixed(4))}`).join('+');
}
