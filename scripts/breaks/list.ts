/** One line of the program made wrong, as a tired hand might write it, and the tests that have to notice. */
export interface Break {
  /** What is wrong then. */
  readonly what: string;
  readonly file: string;
  /** Part of a line that occurs once in the file, and what stands there instead. */
  readonly find: string;
  readonly put: string;
  /** The file of tests that is run. */
  readonly tests: string;
}

export const BREAKS: readonly Break[] = [
  {
    what: 'shaft power goes with the square of speed',
    file: 'server/hydraulics/pump.ts',
    find: 's * s * s * curve.shaft(q / s)',
    put: 's * s * curve.shaft(q / s)',
    tests: 'tests/staging/examples.test.ts',
  },
  {
    what: "a pump's branch loss is left out of its flow",
    file: 'server/hydraulics/pump.ts',
    find: 'const k = this.branchLoss;',
    put: 'const k = 0;',
    tests: 'tests/staging/examples.test.ts',
  },
  {
    what: 'the motor is taken to lose nothing',
    file: 'server/hydraulics/pump.ts',
    find: 'return shaft / (motor * drive);',
    put: 'return shaft / drive;',
    tests: 'tests/staging/examples.test.ts',
  },
  {
    what: 'an idling motor has the efficiency of its first point',
    file: 'server/drive/partLoad.ts',
    find: 'return load / (load + first.load * (1 / first.efficiency - 1));',
    put: 'return first.efficiency;',
    tests: 'tests/proofs/equalPumps.test.ts',
  },
  {
    what: 'slopes of a table weigh the nearer step more',
    file: 'server/hydraulics/pchip.ts',
    find: 'const w1 = 2 * h[i]! + h[i - 1]!;',
    put: 'const w1 = h[i]! + 2 * h[i - 1]!;',
    tests: 'tests/hydraulics/pchip.test.ts',
  },
  {
    what: 'the system has no static head',
    file: 'server/hydraulics/systemCurve.ts',
    find: 'return staticHead + friction.at(flow);',
    put: 'return friction.at(flow);',
    tests: 'tests/staging/examples.test.ts',
  },
  {
    what: 'gallons are imperial ones',
    file: 'server/units.ts',
    find: 'gpm: US_GALLON / 60,',
    put: 'gpm: (1.20095 * US_GALLON) / 60,',
    tests: 'tests/accuracy/accuracy.test.ts',
  },
  {
    what: 'gaps are filled with no flow',
    file: 'server/staging/demandRecord.ts',
    find: 'const flow = log.flow;',
    put: 'const flow = log.flow && log.flow.map((q) => (Number.isNaN(q) ? 0 : q));',
    tests: 'tests/staging/demandRecord.test.ts',
  },
  {
    what: 'the two passes of the repeated hour change places',
    file: 'server/ingest/localTime.ts',
    find: 'second.has(row) ? change.after : change.before',
    put: 'second.has(row) ? change.before : change.after',
    tests: 'tests/ingest/clockChange.test.ts',
  },
  {
    what: 'two states share an interval the wrong way round',
    file: 'server/staging/state.ts',
    find: 'share: (flow - low.flow) / (high.flow - low.flow)',
    put: 'share: (high.flow - flow) / (high.flow - low.flow)',
    tests: 'tests/staging/examples.test.ts',
  },
  {
    what: 'what the pumps cannot meet is not told',
    file: 'server/staging/rules/trimmedCounts.ts',
    find: 'return held(full, flow - full.flow);',
    put: 'return held(full);',
    tests: 'tests/laws/stationLaws.test.ts',
  },
  {
    what: 'of two counts alike the larger runs',
    file: 'server/staging/rules/trimmedCounts.ts',
    find: 'a.power < b.power * (1 - 1e-12)',
    put: 'a.power < b.power * (1 + 1e-12)',
    tests: 'tests/staging/bestCount.test.ts',
  },
  {
    what: 'steps have no dead band',
    file: 'server/staging/rules/flowSteps.ts',
    find: 'flow < dropOff[carried - 2]!',
    put: 'flow < bringOn[carried - 2]!',
    tests: 'tests/staging/flowSteps.test.ts',
  },
  {
    what: 'starts cost nothing in `steady`',
    file: 'server/staging/rules/steady.ts',
    find: 'leave[from]! + startPenalty * startsBetween(baseBefore[from]!, now.base[to]!)',
    put: 'leave[from]!',
    tests: 'tests/staging/steady.test.ts',
  },
  {
    what: 'the floor knows no pump direct on line',
    file: 'server/staging/leastPower.ts',
    find: "modes: ['line', 'drive'], valve: true",
    put: "modes: ['drive'], valve: true",
    tests: 'tests/laws/stationLaws.test.ts',
  },
  {
    what: 'branch loss stands twice in the ledger',
    file: 'server/staging/state.ts',
    find: 'into.branch += r.count * weight',
    put: 'into.branch += 2 * r.count * weight',
    tests: 'tests/laws/stationLaws.test.ts',
  },
  {
    what: 'of rates that match the last one counts',
    file: 'server/tariff/plan.ts',
    find: 'ratesToday.find(',
    put: 'ratesToday.findLast(',
    tests: 'tests/tariff/bill.test.ts',
  },
  {
    what: 'local time is an hour ahead',
    file: 'server/time.ts',
    find: 'return Math.round(tzOffset(zone, new Date(instantMs)) * MINUTE_MS);',
    put: 'return Math.round(tzOffset(zone, new Date(instantMs)) * MINUTE_MS) + HOUR_MS;',
    tests: 'tests/tariff/bill.test.ts',
  },
  {
    what: 'demand is the least window of a month',
    file: 'server/tariff/bill.ts',
    find: 'kw > before',
    put: 'kw < before',
    tests: 'tests/tariff/bill.test.ts',
  },
  {
    what: 'a ratchet looks back one month less',
    file: 'server/tariff/bill.ts',
    find: 'other >= here - charge.ratchet.months',
    put: 'other > here - charge.ratchet.months',
    tests: 'tests/tariff/bill.test.ts',
  },
  {
    what: 'the outlay is added to the present value',
    file: 'server/economics/investment.ts',
    find: 'npv: saved - outlay,',
    put: 'npv: saved + outlay,',
    tests: 'tests/economics/investment.test.ts',
  },
  {
    what: 'savings shrink where energy grows dearer',
    file: 'server/economics/investment.ts',
    find: '(1 + terms.energyEscalation) ** (i + 1)',
    put: '(1 - terms.energyEscalation) ** (i + 1)',
    tests: 'tests/economics/investment.test.ts',
  },
  {
    what: 'a record is stored without a transaction',
    file: 'db/records.ts',
    find: 'return db.transaction(() => {',
    put: 'return (() => {',
    tests: 'tests/db/records.test.ts',
  },
  {
    what: 'a page from elsewhere may change what is stored',
    file: 'server/guards.ts',
    find: 'new URL(origin).host === host',
    put: 'new URL(origin).host !== null',
    tests: 'tests/http/faults.test.ts',
  },
];
