import { FITTING_NAMES, fittingLoss } from '../hydraulics/fittings.ts';
import { areaOf, MOST_RELATIVE_ROUGHNESS, type Pipe, PipeFriction } from '../hydraulics/pipe.ts';
import type { Friction } from '../hydraulics/systemCurve.ts';
import { waterViscosity } from '../hydraulics/water.ts';
import { shown } from '../readFile.ts';
import { FOOT, INCH } from '../units.ts';
import type { Reading } from './reading.ts';
import type { Main } from './station.ts';
import type { StationFile } from './stationFile.ts';

type PipeEntry = Extract<StationFile['system']['friction'], { pipes: unknown }>['pipes'][number];

/** Temperature taken for the viscosity where the file gives the density alone [°C]. */
const ASSUMED_CELSIUS = 15;

/**
 * Least velocity that keeps solids moving and the most that is usual in a main [m/s]: EI 11C201 (US Army, 1 March 1997)
 * section 7-1. Local rules differ (0.9 m/s in MIL-HDBK-1005/9A), so a file may set its own.
 */
const USUAL_VELOCITY = { from: 0.6, to: 3 };

/** Pipes of a file: friction at any flow, and what the velocity in the main is judged by. */
export function readPipes(
  entries: readonly PipeEntry[],
  velocity: StationFile['system']['velocity'],
  reading: Reading,
): { friction: Friction; main: Main } {
  const pipes = entries.map((entry, i) => readPipe(entry, `system.friction.pipes[${i}]`, reading));
  const areas = pipes.map(areaOf);
  return {
    friction: new PipeFriction(pipes, viscosityFor(pipes, reading)),
    main: {
      widestArea: Math.max(...areas),
      narrowestArea: Math.min(...areas),
      leastVelocity: velocity ? velocity.from * reading.head : USUAL_VELOCITY.from,
      mostVelocity: velocity ? velocity.to * reading.head : USUAL_VELOCITY.to,
    },
  };
}

function readPipe(entry: PipeEntry, at: string, reading: Reading): Pipe {
  const width = reading.head === FOOT ? INCH : 1e-3;
  const { roughness, hazenWilliamsC } = entry;
  if (roughness !== undefined && hazenWilliamsC !== undefined) {
    reading.fault('unknown_field', `${at}.hazenWilliamsC`, 'hazenWilliamsC beside roughness', 'one of the two');
  }
  if (roughness === undefined && hazenWilliamsC === undefined) {
    reading.fault('missing_field', at, 'neither roughness nor hazenWilliamsC', 'one of the two');
  }
  if (roughness !== undefined && roughness > MOST_RELATIVE_ROUGHNESS * entry.diameter) {
    const unit = width === INCH ? 'inches' : 'mm';
    reading.fault(
      'out_of_range',
      `${at}.roughness`,
      `${roughness} for a diameter of ${entry.diameter}, both in ${unit}`,
      `at most ${MOST_RELATIVE_ROUGHNESS} of the diameter, for which the formula holds`,
    );
  }
  let minorLoss = entry.minorLoss ?? 0;
  (entry.fittings ?? []).forEach((fitting, i) => {
    const k = fittingLoss(fitting.type);
    if (k === null) {
      reading.fault(
        'unknown_name',
        `${at}.fittings[${i}].type`,
        shown(fitting.type),
        `one of ${FITTING_NAMES.join(', ')}; give the K of any other in minorLoss`,
      );
    } else minorLoss += (fitting.count ?? 1) * k;
  });
  return {
    length: entry.length * reading.head,
    diameter: entry.diameter * width,
    wall: hazenWilliamsC !== undefined ? { hazenWilliamsC } : { roughness: (roughness ?? 0) * width },
    minorLoss,
  };
}

/** ν = μ/ρ of the liquid; where its temperature is unknown, μ is that of water at 15 °C, and that is said. */
function viscosityFor(pipes: readonly Pipe[], reading: Reading): number {
  if (reading.temperature === null && pipes.some((pipe) => 'roughness' in pipe.wall)) {
    reading.notes.push({
      code: 'viscosity-assumed',
      text: `The friction of the pipes is worked out with the viscosity of water at ${ASSUMED_CELSIUS} °C: the station file gives a density and no temperature.`,
    });
  }
  return waterViscosity(reading.temperature ?? ASSUMED_CELSIUS) / reading.density;
}
