import type { PartLoad } from './drive/partLoad.ts';
import type { Note } from './errors.ts';
import { fitParabola } from './hydraulics/curveFit.ts';
import type { Machine } from './hydraulics/pump.ts';
import { vapourPressure, waterViscosity } from './hydraulics/water.ts';
import { setName } from './staging/compare.ts';
import { firmCapacity } from './staging/firmCapacity.ts';
import { stagedPumpsOf } from './staging/stagedPumpsOf.ts';
import type { State } from './staging/state.ts';
import { npshRatio } from './staging/watch.ts';
import { pumpsByMake, type Station } from './station/station.ts';
import { energyKwh, type FileUnits, FLOW_UNITS, HEAD_UNITS } from './units.ts';

/**
 * What a station file comes to before any record is laid on it: what an engineer checks first. Flows and heads are in
 * the units of the file; where a name says a unit, in that.
 */
export interface StationFacts {
  readonly format: 'nth-pump/facts/1';
  readonly station: string;
  readonly units: FileUnits;
  readonly liquid: {
    readonly densityKgM3: number;
    /** The rest is null where the file gives a density and no temperature. */
    readonly temperatureC: number | null;
    readonly kinematicViscosityMm2s: number | null;
    readonly vapourPressureKpa: number | null;
  };
  readonly pumps: readonly PumpFacts[];
  /** The first n duty pumps at rated speed, each on where it can open its check valve, at the station's static head. */
  readonly points: readonly PointFacts[];
  readonly staticHead: number;
  readonly firmCapacity: number;
  readonly notes: readonly Note[];
}

/** Pumps of one make; a train has several machines. */
export interface PumpFacts {
  readonly names: readonly string[];
  readonly machines: readonly MachineFacts[];
}

export interface MachineFacts {
  readonly inSeries: number;
  readonly shutoffHead: number;
  readonly endFlow: number;
  readonly bestFlow: number;
  readonly bestEfficiency: number;
  readonly headAtBest: number;
  /** NPSH required at best-efficiency flow; null where the file does not say. */
  readonly npshRequiredAtBest: number | null;
  /** A number, or the table that a name in the file stands for. */
  readonly motorEfficiency: PartLoad;
  readonly driveEfficiency: PartLoad | null;
  /** The points against the nearest parabola; null where the curve was given as one. */
  readonly fit: FitFacts | null;
}

export interface FitFacts {
  readonly shutoffHead: number;
  readonly shape: number;
  readonly rSquared: number | null;
  /** Head of the furthest point less that of the parabola; as a share of the highest head; and the row, from 1. */
  readonly largestMiss: number;
  readonly largestMissPercent: number;
  readonly row: number;
}

export interface PointFacts {
  readonly count: number;
  readonly pumps: string;
  readonly flow: number;
  readonly systemHead: number;
  /** At the supply, standby included; and per m³. */
  readonly powerKw: number;
  readonly kwhPerM3: number | null;
  /** Least and greatest flow of a running pump as a share of its best; null where none can lift the static head. */
  readonly leastShareOfBest: number | null;
  readonly greatestShareOfBest: number | null;
  /** In the widest and in the narrowest pipe; null where the file has no pipes. */
  readonly slowestMs: number | null;
  readonly fastestMs: number | null;
  /** NPSH available over required; null where it cannot be told. */
  readonly npshRatio: number | null;
}

/** A point this far off the parabola, as a share of the highest head, is worth a second look at the maker's curve. */
const WORTH_A_LOOK = 0.05;

/** The facts of a station, from its file alone. */
export function stationFacts(station: Station): StationFacts {
  const { units, temperature, density, duty, standby } = station;
  const pumps = pumpsByMake([...duty, ...standby]).map((alike) => ({
    names: alike.map((pump) => pump.name),
    machines: alike[0]!.machines.map((machine) => machineFacts(machine, units)),
  }));
  return {
    format: 'nth-pump/facts/1',
    station: station.name,
    units,
    liquid: {
      densityKgM3: density,
      temperatureC: temperature,
      kinematicViscosityMm2s: temperature === null ? null : (1e6 * waterViscosity(temperature)) / density,
      vapourPressureKpa: temperature === null ? null : vapourPressure(temperature) / 1000,
    },
    pumps,
    points: pointsOf(station),
    staticHead: station.staticHead / HEAD_UNITS[units.head],
    firmCapacity: firmCapacity(station, duty) / FLOW_UNITS[units.flow],
    notes: [...station.notes, ...pumps.flatMap(fitNotes)],
  };
}

function machineFacts({ curve, inSeries, npshr, motor, drive }: Machine, units: FileUnits): MachineFacts {
  const flow = FLOW_UNITS[units.flow];
  const head = HEAD_UNITS[units.head];
  const points = curve.points?.map((point) => ({ flow: point.flow / flow, head: point.head / head }));
  const fit = points ? fitParabola(points) : null;
  return {
    inSeries,
    shutoffHead: curve.shutoffHead / head,
    endFlow: curve.endFlow / flow,
    bestFlow: curve.bestFlow / flow,
    bestEfficiency: curve.bestEfficiency,
    headAtBest: curve.head(curve.bestFlow) / head,
    npshRequiredAtBest: npshr ? npshr.at(curve.bestFlow) / head : null,
    motorEfficiency: motor.efficiency,
    driveEfficiency: drive?.efficiency ?? null,
    fit: fit && {
      shutoffHead: fit.shutoffHead,
      shape: fit.shape,
      rSquared: fit.rSquared,
      largestMiss: fit.largestMiss,
      largestMissPercent: (100 * Math.abs(fit.largestMiss) * head) / curve.shutoffHead,
      row: fit.worst + 1,
    },
  };
}

function fitNotes({ names, machines }: PumpFacts): Note[] {
  return machines.flatMap(({ fit }, i) => {
    if (!fit || fit.largestMissPercent <= 100 * WORTH_A_LOOK) return [];
    const which = machines.length > 1 ? `${names[0]}, machine ${i + 1}` : names[0];
    return [
      {
        code: 'curve-off-parabola',
        text:
          `${which}: row ${fit.row} of the curve lies ${fit.largestMissPercent.toFixed(0)} % of the highest head off ` +
          "the nearest parabola. Pump curves seldom do; compare that row with the maker's curve.",
      },
    ];
  });
}

function pointsOf(station: Station): PointFacts[] {
  const pumps = stagedPumpsOf(station, station.duty);
  return station.duty.map((_, i) => pointFacts(station, i + 1, pumps.fixed(i + 1)));
}

function pointFacts(station: Station, count: number, state: State): PointFacts {
  const { units, friction, staticHead, main, suction, standbyPower } = station;
  const { flow } = state;
  const runs = state.count > 0;
  const power = state.power + standbyPower;
  return {
    count,
    pumps: setName(state.set, station.duty),
    flow: flow / FLOW_UNITS[units.flow],
    systemHead: (staticHead + friction.at(flow)) / HEAD_UNITS[units.head],
    powerKw: power / 1000,
    kwhPerM3: runs ? energyKwh(power, 1 / flow) : null,
    leastShareOfBest: runs ? state.leastShareOfBest : null,
    greatestShareOfBest: runs ? state.greatestShareOfBest : null,
    slowestMs: main && flow / main.widestArea,
    fastestMs: main && flow / main.narrowestArea,
    npshRatio: npshRatio(station, state, suction?.level ?? Number.NaN),
  };
}
