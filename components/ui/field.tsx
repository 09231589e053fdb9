import {
  useId,
  type InputHTMLAttributes,
  type ReactNode,
  type SelectHTMLAttributes,
  type TextareaHTMLAttributes,
} from 'react';

interface Words {
  label: ReactNode;
  /** Heard, not seen: where the place says what is asked. */
  labelHidden?: boolean;
  help?: ReactNode;
  /** What is wrong, as a sentence; marks the field. */
  error?: string;
}

function Frame({ id, words, children }: { id: string; words: Words; children: ReactNode }) {
  return (
    <div className="min-w-0">
      <label htmlFor={id} className={words.labelHidden ? 'only-heard' : 'label'}>
        {words.label}
      </label>
      {children}
      {words.error ? (
        <p id={`${id}-help`} className="help wrong">
          {words.error}
        </p>
      ) : words.help ? (
        <p id={`${id}-help`} className="help">
          {words.help}
        </p>
      ) : null}
    </div>
  );
}

function described(id: string, words: Words) {
  return {
    id,
    'aria-invalid': words.error ? true : undefined,
    'aria-describedby': words.error || words.help ? `${id}-help` : undefined,
  } as const;
}

type FieldProps = Words & InputHTMLAttributes<HTMLInputElement>;

export function Field({ label, labelHidden, help, error, className = '', ...rest }: FieldProps) {
  const own = useId();
  const id = rest.id ?? own;
  const words = { label, labelHidden, help, error };
  return (
    <Frame id={id} words={words}>
      <input {...rest} {...described(id, words)} className={`field ${className}`} />
    </Frame>
  );
}

type TextAreaProps = Words & TextareaHTMLAttributes<HTMLTextAreaElement>;

export function TextArea({ label, labelHidden, help, error, className = '', ...rest }: TextAreaProps) {
  const own = useId();
  const id = rest.id ?? own;
  const words = { label, labelHidden, help, error };
  return (
    <Frame id={id} words={words}>
      <textarea rows={3} {...rest} {...described(id, words)} className={`field ${className}`} />
    </Frame>
  );
}

type SelectProps = Words & SelectHTMLAttributes<HTMLSelectElement>;

export function Select({ label, labelHidden, help, error, className = '', children, ...rest }: SelectProps) {
  const own = useId();
  const id = rest.id ?? own;
  const words = { label, labelHidden, help, error };
  return (
    <Frame id={id} words={words}>
      <select {...rest} {...described(id, words)} className={`field ${className}`}>
        {children}
      </select>
    </Frame>
  );
}

interface TickProps extends InputHTMLAttributes<HTMLInputElement> {
  label: ReactNode;
}

export function Tick({ label, ...rest }: TickProps) {
  return (
    <label className="tick">
      <input type="checkbox" {...rest} />
      <span>{label}</span>
    </label>
  );
}
