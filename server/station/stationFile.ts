import { z } from 'zod';

/**
 * The station file, `nth-pump/station/1`: what a person writes, in the file's own units. Only the form is checked here;
 * `readStation` checks what the numbers mean.
 */

export const STATION_FORMAT = 'nth-pump/station/1';

/** No quantity of a station is larger in any of the units; beyond it the arithmetic would overflow. */
const LARGEST = 1e12;

const positive = z.number().positive().max(LARGEST);
const notNegative = z.number().min(0).max(LARGEST);
/** A level above or below the datum. */
const level = z.number().min(-LARGEST).max(LARGEST);
/** Below a thousandth nothing runs, and the arithmetic would overflow. */
const efficiency = z.number().min(0.001).max(1);

/** A number, a table over load, or the name of a published table. */
const partLoad = z.union([efficiency, z.array(z.strictObject({ load: positive, efficiency })).min(1), z.string()]);

const motor = z.strictObject({
  ratedPower: positive.optional(),
  serviceFactor: z.number().min(1).optional(),
  efficiency: partLoad,
});

const drive = z.strictObject({
  fitted: z.boolean().optional(),
  /** With rated speed between the two, the least is never above the highest. */
  minSpeed: z.number().gt(0).max(1),
  maxSpeed: z.number().min(1).max(2).optional(),
  efficiency: partLoad,
});

const curveExtras = {
  maxFlow: positive.optional(),
  npshr: z
    .array(z.strictObject({ flow: notNegative, npshr: positive }))
    .min(2)
    .optional(),
  speedCorrection: z.boolean().optional(),
};

const curve = z.union([
  z.strictObject({
    points: z
      .array(
        z.strictObject({
          flow: notNegative,
          head: notNegative,
          efficiency: z.number().min(0).max(1).optional(),
          power: positive.optional(),
        }),
      )
      .min(4),
    ...curveExtras,
  }),
  z.strictObject({
    shutoffHead: positive,
    operatingPoint: z.strictObject({ flow: positive, head: positive }),
    bestFlow: positive,
    bestEfficiency: efficiency,
    ...curveExtras,
  }),
  z.strictObject({
    shutoffHead: positive,
    shape: notNegative,
    bestFlow: positive,
    bestEfficiency: efficiency,
    ...curveExtras,
  }),
]);

const role = z.enum(['duty', 'standby']).optional();
const count = z.number().int().min(1).max(20).optional();
const inSeries = z.number().int().min(1).max(10).optional();

const singlePump = z.strictObject({
  name: z.string().min(1),
  role,
  count,
  inSeries,
  ratedSpeed: positive.optional(),
  curve,
  branchLoss: notNegative.optional(),
  motor,
  drive: drive.nullable().optional(),
});

const trainOfPumps = z.strictObject({
  name: z.string().min(1),
  role,
  count,
  ratedSpeed: positive.optional(),
  branchLoss: notNegative.optional(),
  train: z
    .array(
      z.strictObject({
        name: z.string().min(1).optional(),
        inSeries,
        ratedSpeed: positive.optional(),
        curve,
        motor,
        drive: drive.nullable().optional(),
      }),
    )
    .min(1),
});

const exponent = z.number().min(1).max(2.5).optional();

/** Length in the unit of head; diameter and roughness in mm, or in inches where heads are in feet. */
const pipe = z.strictObject({
  name: z.string().min(1).optional(),
  length: notNegative,
  diameter: positive,
  roughness: notNegative.optional(),
  hazenWilliamsC: z.number().min(20).max(200).optional(),
  minorLoss: notNegative.optional(),
  fittings: z.array(z.strictObject({ type: z.string(), count: z.number().int().min(1).optional() })).optional(),
});

const friction = z.union([
  z.strictObject({ coefficient: notNegative, exponent }),
  z.strictObject({ points: z.array(z.strictObject({ flow: positive, head: positive })).min(1), exponent }),
  z.strictObject({ pipes: z.array(pipe).min(1) }),
]);

const range = z
  .strictObject({ from: notNegative, to: positive })
  .refine((r) => r.from < r.to, { message: 'from less than to' });

const levelRange = z.strictObject({ start: level, stop: level });

export const stationFile = z.strictObject({
  format: z.literal(STATION_FORMAT),
  name: z.string().min(1),
  timeZone: z.string(),
  currency: z.string().regex(/^[A-Z]{3}$/, 'a currency code of three capitals, such as EUR'),
  units: z.strictObject({
    flow: z.enum(['m3/s', 'm3/h', 'L/s', 'ML/d', 'gpm', 'MGD']),
    head: z.enum(['m', 'ft']),
    power: z.enum(['kW', 'hp']),
  }),
  liquid: z
    .strictObject({
      density: z.number().min(500).max(2000).optional(),
      temperature: z.number().min(0).max(40).optional(),
    })
    .optional(),
  surplus: z.enum(['storage', 'throttle']),
  standbyPower: notNegative.optional(),
  allowable: range.optional(),
  preferred: range.optional(),
  /** Least NPSH available as a multiple of NPSH required. */
  npshMargin: z.number().min(1).optional(),
  system: z.strictObject({
    staticHead: notNegative,
    friction,
    dischargeLevel: level.optional(),
    suctionLevel: level.optional(),
    /** Level of the impellers, over the same datum as the suction level. */
    pumpLevel: z.number().optional(),
    /** One point of the loss in each pump's own suction pipe; its flow is that of the one pump. */
    suctionLoss: z.strictObject({ flow: positive, head: notNegative }).optional(),
    /** Above sea level, in the unit of head. */
    altitude: z.number().optional(),
    /** Usual least and greatest velocity in the main, in the unit of head per second. */
    velocity: range.optional(),
  }),
  storage: z
    .strictObject({
      activeVolume: positive.optional(),
      area: positive.optional(),
      points: z
        .array(z.strictObject({ level, volume: notNegative }))
        .min(2)
        .optional(),
      levels: z.array(levelRange).min(1).optional(),
      side: z.enum(['suction', 'discharge']).optional(),
    })
    .optional(),
  pumps: z.array(z.union([singlePump, trainOfPumps])).min(1),
  /** Names of duty pumps in the order in which they are brought on, or by what that order is found. */
  order: z.union([z.array(z.string()), z.literal('least-power')]).optional(),
  rules: z
    .strictObject({
      'flow-steps': z
        .strictObject({ bringOn: z.array(positive).min(1), dropOff: z.array(notNegative).min(1) })
        .optional(),
      steady: z
        .strictObject({ minRunMinutes: notNegative.optional(), startPenaltyKwh: notNegative.optional() })
        .optional(),
    })
    .optional(),
});

export type StationFile = z.infer<typeof stationFile>;
export type PumpEntry = StationFile['pumps'][number];
export type CurveEntry = z.infer<typeof curve>;
export type PartLoadEntry = z.infer<typeof partLoad>;
