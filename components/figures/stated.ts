import type { StatedValue } from '@/lib/domain/views';
import { formatQuantity } from '@/lib/quantity/format';

/** A setup's value with its uncertainty at k = 2: "250.00 ± 0.19 µm". */
export function statedText(value: StatedValue, unit: string): string {
  const text = formatQuantity(value.value, 2 * value.u);
  return `${text.value} ± ${text.uncertainty} ${unit}`;
}
