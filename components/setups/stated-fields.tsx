'use client';

import { Mark } from '@/components/figures/marks';
import { Field, Select, Tick } from '@/components/ui/field';
import {
  SETUP_VALUES,
  SHAPE_WORDS,
  UNCERTAINTY_SHAPES,
  type UncertaintyShape,
  type ValueKey,
} from '@/lib/domain/setup';
import type { StatedText } from './stated-text';

interface Props {
  valueKey: ValueKey;
  text: StatedText;
  errors: Record<string, string>;
  onChange: (text: StatedText) => void;
}

const STATED_WORDS: Record<UncertaintyShape, string> = {
  expanded: '± as stated',
  rectangular: '± limits',
  'type-a': '± standard uncertainty',
};

export function nameOfValue(valueKey: ValueKey) {
  return SETUP_VALUES.find(({ key }) => key === valueKey)!;
}

/** A value, its ± and what kind that is. Stands in the grid of a value block. */
export function StatedFields({ valueKey, text, errors, onChange }: Props) {
  const { name, symbol, unit } = nameOfValue(valueKey);
  const field = (part: 'value' | 'stated' | 'k' | 'dof') => ({
    inputMode: 'decimal' as const,
    value: text[part],
    error: errors[`${valueKey}.${part}`],
    onChange: (event: React.ChangeEvent<HTMLInputElement>) =>
      onChange({ ...text, [part]: event.target.value }),
  });
  return (
    <>
      <Field label={`${name} ${symbol}, ${unit}`} {...field('value')} />
      <Field label={`${STATED_WORDS[text.shape]}, ${unit}`} {...field('stated')} />
      <Select
        label="Kind of ±"
        value={text.shape}
        onChange={(event) =>
          onChange({
            ...text,
            shape: UNCERTAINTY_SHAPES.find((shape) => shape === event.target.value) ?? 'expanded',
          })
        }
      >
        {UNCERTAINTY_SHAPES.map((shape) => (
          <option key={shape} value={shape}>
            {SHAPE_WORDS[shape]}
          </option>
        ))}
      </Select>
      {text.shape === 'expanded' ? (
        <Field label="at k =" {...field('k')} />
      ) : (
        <span className="max-[1000px]:hidden" />
      )}
      <Field
        label="Degrees of freedom"
        placeholder={text.shape === 'type-a' ? '' : 'none stated'}
        {...field('dof')}
      />
    </>
  );
}

/** What looks odd about a value, to be ticked as right with a reason. */
export function OddValue({
  valueKey,
  hint,
  text,
  errors,
  onChange,
}: Props & {
  /** null: nothing looks odd. */
  hint: string | null;
}) {
  if (!hint) return null;
  const error = errors[`confirmed.${valueKey}`];
  return (
    <div className="hint" role="status">
      <p className="flex items-center gap-2.5 text-small">
        <Mark kind="check-look" /> {hint}
      </p>
      <Tick
        label="It is right"
        checked={text.isRight}
        onChange={(event) => onChange({ ...text, isRight: event.target.checked })}
      />
      {text.isRight || error ? (
        <Field
          label="Why it is right"
          value={text.reason}
          maxLength={300}
          error={error}
          onChange={(event) => onChange({ ...text, isRight: true, reason: event.target.value })}
        />
      ) : null}
    </div>
  );
}
