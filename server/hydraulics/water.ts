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
