import { expect, it } from 'vitest';
import { typicalDrive } from '../../server/drive/driveTables.ts';
import { HORSEPOWER } from '../../server/units.ts';

// The published table, its example and what lies between its sizes are in tests/accuracy/machines.ts.
it('a typical drive is not stretched beyond the sizes of the table', () => {
  expect(typicalDrive(1 * HORSEPOWER)).toEqual(typicalDrive(5 * HORSEPOWER));
  expect(typicalDrive(500 * HORSEPOWER)).toEqual(typicalDrive(200 * HORSEPOWER));
});
