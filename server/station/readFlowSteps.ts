import type { Reading } from './reading.ts';
import type { Station } from './station.ts';
import type { StationFile } from './stationFile.ts';

/** The operator's own table of flows [m³/s] (model.md §5, `flow-steps`); null where the file has none. */
export function readFlowSteps(file: StationFile, dutyCount: number, reading: Reading): Station['flowSteps'] {
  const steps = file.rules?.['flow-steps'];
  if (!steps) return null;
  const at = 'rules.flow-steps';
  const { bringOn, dropOff } = steps;
  const most = Math.max(dutyCount - 1, 0);
  if (bringOn.length !== dropOff.length) {
    reading.fault('steps_fall', `${at}.dropOff`, entries(dropOff), `${bringOn.length}, one for each bringOn`);
  }
  if (bringOn.length > most) {
    reading.fault('steps_fall', `${at}.bringOn`, entries(bringOn), `at most ${most} for ${dutyCount} duty pumps`);
  }
  for (const [name, list] of [
    ['bringOn', bringOn],
    ['dropOff', dropOff],
  ] as const) {
    list.forEach((flow, i) => {
      if (i > 0 && flow <= list[i - 1]!) {
        reading.fault(
          'steps_fall',
          `${at}.${name}[${i}]`,
          `${flow} after ${list[i - 1]}`,
          'flows that rise from step to step',
        );
      }
    });
  }
  dropOff.forEach((flow, i) => {
    const on = bringOn[i];
    if (on !== undefined && flow >= on) {
      reading.fault('steps_fall', `${at}.dropOff[${i}]`, `${flow}`, `less than bringOn[${i}], ${on}`);
    }
  });
  return { bringOn: bringOn.map((q) => q * reading.flow), dropOff: dropOff.map((q) => q * reading.flow) };
}

function entries(list: readonly unknown[]): string {
  return list.length === 1 ? '1 entry' : `${list.length} entries`;
}
