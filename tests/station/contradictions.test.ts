import { describe, expect, it } from 'vitest';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';

/** Codes and texts of the notes of a station with these fields. */
const notesOf = (fields: Readonly<Record<string, unknown>>) => readStation(aStationFile(fields), 'station.json').notes;

const system = { staticHead: 12, friction: { coefficient: 0.001 } };
const levels = [{ start: 2, stop: 1 }];

describe('two fields that say the same by different numbers', () => {
  it('say which static head is taken', () => {
    const [note] = notesOf({ system: { ...system, dischargeLevel: 20, suctionLevel: 4 } });
    expect(note).toMatchObject({ code: 'static-head-differs' });
    expect(note!.text).toContain('staticHead is 12 m, and dischargeLevel less suctionLevel is 16 m');
    expect(notesOf({ system: { ...system, dischargeLevel: 16.2, suctionLevel: 4 } })).toEqual([]);
    expect(notesOf({ system: { ...system, dischargeLevel: 20 } })).toEqual([]);
  });

  it('say which volume is taken', () => {
    const [note] = notesOf({ storage: { activeVolume: 18, area: 6, levels } });
    expect(note).toMatchObject({ code: 'volume-differs' });
    expect(note!.text).toContain('activeVolume is 18, and area and levels of the first pump give 6 m³');
    expect(notesOf({ storage: { activeVolume: 6.1, area: 6, levels } })).toEqual([]);
    expect(notesOf({ storage: { area: 6, levels } })).toEqual([]);
  });
});

it('a pump may be at its best just short of where it has no head left', () => {
  const pump = (bestFlow: number) => [
    {
      name: 'P',
      curve: { shutoffHead: 30, shape: 0.003, bestFlow, bestEfficiency: 0.78 },
      motor: { efficiency: 0.92 },
    },
  ];
  expect(readStation(aStationFile({ pumps: pump(99.9) }), 'station.json').duty).toHaveLength(1);
  expect(() => readStation(aStationFile({ pumps: pump(100) }), 'station.json')).toThrow(
    'station.json pumps[0].curve.bestFlow: found 100; wanted less than 100, the flow at which this curve has no head left',
  );
});
