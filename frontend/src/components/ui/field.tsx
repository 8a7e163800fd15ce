import { useId, type ReactNode, type SelectHTMLAttributes, type InputHTMLAttributes, type TextareaHTMLAttributes } from 'react';

interface Labelled { label: ReactNode; hint?: ReactNode; error?: string | undefined }
interface Wiring { id: string; 'aria-describedby': string | undefined; 'aria-invalid': boolean | undefined }

/** A label, its control, what helps to fill it, and what was refused: tied together for every reader. */
export function Field({ label, hint, error, children }: Labelled & { children: (wiring: Wiring) => ReactNode }) {
  const id = useId();
  const described = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      {children({ id, 'aria-describedby': described || undefined, 'aria-invalid': error ? true : undefined })}
      {hint && <span className="hint-text" id={`${id}-hint`}>{hint}</span>}
      {error && <span className="error-text" id={`${id}-error`}>{error}</span>}
    </div>
  );
}

export function TextField({ label, hint, error, figures, ...rest }: Labelled & { figures?: boolean } & InputHTMLAttributes<HTMLInputElement>) {
  return <Field label={label} hint={hint} error={error}>{(w) => <input {...w} {...rest} className={figures ? 'input fig' : 'input'} />}</Field>;
}
export function TextArea({ label, hint, error, ...rest }: Labelled & TextareaHTMLAttributes<HTMLTextAreaElement>) {
  return <Field label={label} hint={hint} error={error}>{(w) => <textarea {...w} {...rest} className="input" />}</Field>;
}

export type Option = readonly [value: string, label: string];
/** A choice from a short list; an empty first option says in words that nothing is chosen. */
export function Select({ label, hint, error, options, none, ...rest }: Labelled & { options: readonly Option[]; none?: string } & SelectHTMLAttributes<HTMLSelectElement>) {
  return (
    <Field label={label} hint={hint} error={error}>
      {(w) => (
        <select {...w} {...rest} className="input">
          {none !== undefined && <option value="">{none}</option>}
          {options.map(([value, text]) => <option key={value} value={value}>{text}</option>)}
        </select>
      )}
    </Field>
  );
}
