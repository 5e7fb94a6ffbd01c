/** A wastewater lift of two equal pumps with drives proposed, in L/s, m and kW; any field may be replaced. */
export function aStationFile(fields: Readonly<Record<string, unknown>> = {}): Record<string, unknown> {
  return {
    format: 'nth-pump/station/1',
    name: 'Mill Lane',
    timeZone: 'Europe/Dublin',
    currency: 'EUR',
    units: { flow: 'L/s', head: 'm', power: 'kW' },
    surplus: 'storage',
    system: { staticHead: 12, friction: { coefficient: 0.001, exponent: 2 } },
    storage: { activeVolume: 10 },
    pumps: [
      {
        name: 'P',
        role: 'duty',
        count: 2,
        curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
        motor: { ratedPower: 30, efficiency: 0.92 },
        drive: { fitted: false, minSpeed: 0.5, maxSpeed: 1, efficiency: 0.97 },
      },
    ],
    ...fields,
  };
}

/** Two days of hours, in L/s, rising from 20 to 90 over each day; hour 30 is missing. */
export function aRecordCsv(): string {
  const rows = Array.from({ length: 48 }, (_, hour) => {
    const time = new Date(Date.UTC(2025, 0, 6, hour)).toISOString();
    return `${time},${20 + ((hour % 24) * 70) / 23}`;
  });
  return ['time,flow', ...rows.filter((_, hour) => hour !== 30)].join('\n');
}
