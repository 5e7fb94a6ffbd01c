import { expect, it } from 'vitest';
import { latestRecord, tariffFor } from '../../client/opening.ts';
import { differences, dutyNames, equipmentOf, numberAt, withNumber } from '../../client/station.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { aStationFile } from '../support/aStation.ts';

const file = aStationFile() as StationFile;

it('a touched number is a difference until it is put back', () => {
  const path = ['system', 'staticHead'];
  const draft = withNumber(file, path, 4);
  expect(numberAt(draft, path)).toBe(4);
  expect(numberAt(file, path)).toBe(12);
  expect(differences(file, draft)).toEqual([{ path, saved: 12, draft: 4 }]);
  expect(differences(file, withNumber(draft, path, 12))).toEqual([]);
});

it('a number within a list is touched in a copy of the list', () => {
  const path = ['pumps', 0, 'curve', 'bestFlow'];
  const draft = withNumber(file, path, 60);
  expect(Array.isArray(draft.pumps)).toBe(true);
  expect(differences(file, draft)).toEqual([{ path, saved: 50, draft: 60 }]);
});

it('has no number where the file has none', () => {
  expect(numberAt(file, ['standbyPower'])).toBeNull();
  expect(numberAt(file, ['pumps', 3, 'curve', 'bestFlow'])).toBeNull();
});

it('names duty pumps as results do: numbered where an entry stands for several', () => {
  const [pump] = file.pumps as unknown as [Record<string, unknown>];
  const pumps = [pump, { ...pump, name: 'Q', count: 1 }, { ...pump, name: 'S', role: 'standby' }];
  expect(dutyNames({ ...file, pumps } as unknown as StationFile)).toEqual(['P-1', 'P-2', 'Q']);
});

it('counts pumps that stand for several, drives fitted and proposed', () => {
  expect(equipmentOf(file)).toEqual({ duty: 2, standby: 0, fitted: 0, driven: 2 });
  const [pump] = file.pumps as unknown as [Record<string, unknown>];
  const pumps = [
    { ...pump, drive: { minSpeed: 0.5, efficiency: 0.97 } },
    { ...pump, name: 'Q', role: 'standby', count: 1 },
    { ...pump, name: 'R', count: 1, drive: null },
  ];
  expect(equipmentOf({ ...file, pumps } as unknown as StationFile)).toEqual({
    duty: 3,
    standby: 1,
    fitted: 2,
    driven: 2,
  });
});

it('opens the last record, and the tariff last used or else one that fits', () => {
  const records = [{ id: 2 }, { id: 5 }, { id: 3 }] as unknown as Parameters<typeof latestRecord>[0];
  expect(latestRecord(records)?.id).toBe(5);
  const station = { ...file, id: 1, demo: false };
  const of = (id: number, currency: string, demo = false) => ({
    id,
    name: '',
    demo,
    currency,
    timeZone: 'Europe/Dublin',
  });
  const tariffs = [of(1, 'EUR'), of(2, 'EUR'), of(3, 'USD'), of(4, 'EUR', true)];
  expect(tariffFor(station, { tariffId: 1 }, tariffs)).toBe(1);
  expect(tariffFor(station, { tariffId: 99 }, tariffs)).toBe(2);
  expect(tariffFor(station, { tariffId: null }, [of(3, 'USD')])).toBeNull();
});
