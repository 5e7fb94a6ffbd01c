/**
 * Density of clean, air-free water at 101.325 kPa [kg/m³], 0 to 40 °C.
 *
 * @param celsius  temperature [°C]
 * @see            M. Tanaka et al., "Recommended table for the density of water between 0 °C and 40 °C based on recent
 *                 experimental reports", Metrologia 38 (2001) 301–309 (formula as quoted in public code)
 */
export function waterDensity(celsius: number): number {
  const t = celsius;
  return 999.97495 * (1 - ((t - 3.983035) ** 2 * (t + 301.797)) / (522528.9 * (t + 69.34881)));
}

/** Dynamic viscosity of water at 20 °C [Pa·s], that of IAPWS R12-08 at 101.325 kPa. */
const VISCOSITY_AT_20 = 1.0016e-3;

/**
 * Dynamic viscosity of water at 101.325 kPa [Pa·s], 0 to 40 °C.
 *
 * @param celsius  temperature [°C]
 * @see            J. Kestin, M. Sokolov and W. A. Wakeham, "Viscosity of liquid water in the range −8 °C to 150 °C",
 *                 J. Phys. Chem. Ref. Data 7 (1978) 941–948: log₁₀(μ/μ₂₀) as a function of 20 °C − t (formula from
 *                 memory; within 0.1 % of IAPWS R12-08)
 */
export function waterViscosity(celsius: number): number {
  const below = 20 - celsius;
  const exponent = (below / (celsius + 96)) * (1.2364 - 1.37e-3 * below + 5.7e-6 * below * below);
  return VISCOSITY_AT_20 * 10 ** exponent;
}

/**
 * Vapour pressure of water [Pa], 0 to 40 °C (the formula holds up to the critical point).
 *
 * @param celsius  temperature [°C]
 * @see            IAPWS Industrial Formulation 1997 (R7-97), region 4, saturation-pressure equation (coefficients from
 *                 memory; they give the release's own verification values to nine digits)
 */
export function vapourPressure(celsius: number): number {
  const kelvin = celsius + 273.15;
  const theta = kelvin - 0.23855557567849 / (kelvin - 650.17534844798);
  const a = theta * theta + 1167.0521452767 * theta - 724213.16703206;
  const b = -17.073846940092 * theta * theta + 12020.82470247 * theta - 3232555.0322333;
  const c = 14.91510861353 * theta * theta - 4823.2657361591 * theta + 405113.40542057;
  return 1e6 * ((2 * c) / (-b + Math.sqrt(b * b - 4 * a * c))) ** 4;
}

/**
 * Pressure of the air [Pa] at a height above sea level, in the standard atmosphere of ISO 2533:1975 (formula from
 * memory), −2000 to 11 000 m. Weather moves it by a few per cent.
 *
 * @param altitude  [m]
 */
export function airPressure(altitude: number): number {
  return 101_325 * (1 - (0.0065 * altitude) / 288.15) ** 5.25588;
}
