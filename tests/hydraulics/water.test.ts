import { describe, expect, it } from 'vitest';
import { airPressure, vapourPressure, waterDensity, waterViscosity } from '../../server/hydraulics/water.ts';

const off = (found: number, wanted: number): number => Math.abs(found / wanted - 1);

/** °C, kg/m³, Pa, µPa·s: IAPWS-95 at 101 325 Pa, IF97 saturation pressure and R12-08, worked out independently. */
const IAPWS = [
  [0.01, 999.8438, 611.66, 1791.13],
  [5, 999.9666, 872.57, 1518.17],
  [10, 999.7025, 1228.18, 1305.9],
  [15, 999.1026, 1705.74, 1137.57],
  [20, 998.2072, 2339.21, 1001.6],
  [25, 997.0476, 3169.75, 890.02],
  [30, 995.6495, 4246.69, 797.22],
  [35, 994.0333, 5628.62, 719.13],
  [40, 992.2164, 7384.43, 652.73],
] as const;

describe('water', () => {
  it.each(IAPWS)('at %s °C is that of IAPWS', (celsius, density, vapour, viscosity) => {
    expect(Math.abs(waterDensity(celsius) - density)).toBeLessThan(0.0015);
    expect(off(vapourPressure(celsius), vapour)).toBeLessThan(1e-5);
    expect(off(waterViscosity(celsius) * 1e6, viscosity)).toBeLessThan(1e-3);
  });

  it.each([
    // IAPWS R7-97, verification values of the saturation-pressure equation
    [300, 3536.58941],
    [500, 2638897.76],
    [600, 12344314.6],
  ])('has the vapour pressure of the IF97 release at %s K', (kelvin, pascal) => {
    expect(off(vapourPressure(kelvin - 273.15), pascal)).toBeLessThan(3e-9);
  });

  it.each([
    // HI Data Library II.A, Table 2.A.2 (saturated liquid): bar, kg/m³, cP
    [0, 0.0061165, 999.79, 1.7912],
    [10, 0.01229, 999.65, 1.3056],
    [20, 0.023408, 998.16, 1.0014],
    [30, 0.042494, 995.6, 0.79719],
    [40, 0.073889, 992.17, 0.65285],
  ])('agrees with a handbook at %s °C', (celsius, bar, density, viscosity) => {
    expect(off(vapourPressure(celsius) / 1e5, bar)).toBeLessThan(2e-3);
    expect(off(waterDensity(celsius), density)).toBeLessThan(1e-4);
    expect(off(waterViscosity(celsius) * 1e3, viscosity)).toBeLessThan(1e-3);
  });
});

describe('air', () => {
  it.each([
    // tables of the standard atmosphere, from memory
    [0, 101325],
    [1000, 89874.6],
    [2000, 79495.2],
  ])('at %s m has the pressure of the standard atmosphere', (altitude, pascal) => {
    expect(off(airPressure(altitude), pascal)).toBeLessThan(1e-6);
  });
});
