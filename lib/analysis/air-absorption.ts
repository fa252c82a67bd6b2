/** What the air itself takes from a tone on its way: nothing at 1 m, decibels at 10 m and 10 kHz. */

const REFERENCE_KELVIN = 293.15;
const TRIPLE_POINT_KELVIN = 273.16;
const CELSIUS_ZERO_KELVIN = 273.15;
const REFERENCE_KPA = 101.325;
const DB_PER_NEPER = 8.686;

export interface Air {
  temperatureC: number;
  relativeHumidityPercent: number;
  pressureKpa?: number;
}

/**
 * Pure-tone attenuation, dB per metre.
 * @see ISO 9613-1:1993, formulas (3) to (5) and annex B
 */
export function toAirLossDbPerM(frequencyHz: number, air: Air): number {
  const pressure = (air.pressureKpa ?? REFERENCE_KPA) / REFERENCE_KPA;
  const kelvin = air.temperatureC + CELSIUS_ZERO_KELVIN;
  const warmth = kelvin / REFERENCE_KELVIN;
  const saturation = 10 ** (-6.8346 * (TRIPLE_POINT_KELVIN / kelvin) ** 1.261 + 4.6151);
  // Molar concentration of water vapour, %.
  const water = (air.relativeHumidityPercent * saturation) / pressure;
  const oxygenHz = pressure * (24 + (4.04e4 * water * (0.02 + water)) / (0.391 + water));
  const nitrogenHz =
    pressure * warmth ** -0.5 * (9 + 280 * water * Math.exp(-4.17 * (warmth ** (-1 / 3) - 1)));
  const square = frequencyHz ** 2;
  const oxygen = (0.01275 * Math.exp(-2239.1 / kelvin)) / (oxygenHz + square / oxygenHz);
  const nitrogen = (0.1068 * Math.exp(-3352 / kelvin)) / (nitrogenHz + square / nitrogenHz);
  return (
    DB_PER_NEPER *
    square *
    ((1.84e-11 * warmth ** 0.5) / pressure + warmth ** -2.5 * (oxygen + nitrogen))
  );
}
