import type { StationFile } from '../server/station/stationFile.ts';
import { FLOW_UNITS, HEAD_UNITS, POWER_UNITS, volumeUnit } from '../server/units.ts';
import { type Format, type Measure, shownFlowUnit } from './format.ts';
import type { Path } from './station.ts';

/** A number of the station file that a reader may try out. */
export interface Touchable {
  readonly label: string;
  readonly path: Path;
  readonly measure: Measure;
  /** In the unit of the API per unit of the file. */
  readonly fileFactor: number;
  readonly step: number;
}

/** Every number that may be tried out, whether or not the file has it. */
export function touchables({ units, pumps }: StationFile, format: Format): Touchable[] {
  const head = HEAD_UNITS[units.head];
  const all: Touchable[] = [
    { label: 'Static head', path: ['system', 'staticHead'], measure: format.head, fileFactor: head, step: 1 },
    {
      label: 'Friction coefficient',
      path: ['system', 'friction', 'coefficient'],
      measure: { unit: `${units.head} at 1 ${shownFlowUnit(units.flow)}`, factor: 1 },
      fileFactor: 1,
      step: 1e-5,
    },
    {
      label: 'Standby power',
      path: ['standbyPower'],
      measure: format.power,
      fileFactor: POWER_UNITS[units.power] / 1000,
      step: 0.1,
    },
    {
      label: 'Active volume',
      path: ['storage', 'activeVolume'],
      measure: format.volume,
      fileFactor: volumeUnit(units.flow),
      step: 1,
    },
  ];
  for (let i = 0; i < pumps.length; i++) {
    const of = pumps.length === 1 ? '' : `, ${pumps[i]!.name}`;
    all.push(
      {
        label: `Flow at best efficiency${of}`,
        path: ['pumps', i, 'curve', 'bestFlow'],
        measure: format.flow,
        fileFactor: FLOW_UNITS[units.flow],
        step: 1,
      },
      {
        label: `Best efficiency${of}`,
        path: ['pumps', i, 'curve', 'bestEfficiency'],
        measure: format.percent,
        fileFactor: 100,
        step: 1,
      },
      {
        label: `Least speed of a drive${of}`,
        path: ['pumps', i, 'drive', 'minSpeed'],
        measure: { unit: '% of rated', factor: 1 },
        fileFactor: 100,
        step: 5,
      },
      {
        label: `Efficiency of a drive${of}`,
        path: ['pumps', i, 'drive', 'efficiency'],
        measure: format.percent,
        fileFactor: 100,
        step: 0.5,
      },
    );
  }
  return all;
}
