import type { CaseFile } from '../economics/caseFile.ts';
import type { StationFile } from '../station/stationFile.ts';
import type { TariffFile } from '../tariff/tariffFile.ts';

/** The files that somebody with this station would bring. */
export interface Demo {
  readonly station: StationFile;
  readonly tariff: TariffFile;
  /** A year of hours. */
  readonly recordCsv: string;
  readonly caseFile: CaseFile;
}
