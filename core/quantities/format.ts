/**
 * Writes a number in SI for a person to read: `5e-5` as a length becomes `50 µm`. For sentences, never for files.
 */
import { DIMENSIONS, type Dimension, type DimensionName } from './dimensions.ts';
import { nearestDouble, power } from './exact.ts';
import { normaliseUnit, readUnit } from './unit-expression.ts';

/**
 * A quantity in a unit that keeps its number between 1 and 1000 where one is at hand, to six significant digits.
 * @param value in SI
 */
export function formatQuantity(value: number, name: DimensionName): string {
  const dimension: Dimension = DIMENSIONS[name];
  if (name === 'temperature') return `${shorten(value - 273.15)} °C`;
  if (!Number.isFinite(value) || dimension.siUnit === '') return joined(value, dimension.siUnit);
  if (value === 0) return joined(0, dimension.siUnit);
  let best = dimension.display[0]!;
  for (const unit of dimension.display) if (Math.abs(inUnit(value, unit)) >= 1 - 1e-9) best = unit;
  return joined(inUnit(value, best), best);
}

function joined(value: number, unit: string): string {
  return unit === '' ? shorten(value) : `${shorten(value)} ${unit}`;
}

function inUnit(value: number, unit: string): number {
  const reading = readUnit(normaliseUnit(unit));
  if (!reading.ok) throw new Error(`a unit for reading that this room does not know: ${unit}`);
  return nearestDouble(String(value), power(reading.unit.factor, -1));
}

function shorten(value: number): string {
  return String(Number(value.toPrecision(6)));
}
