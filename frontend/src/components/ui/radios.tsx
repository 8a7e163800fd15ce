import { useId, type ReactNode } from 'react';

/** One of a few, all in sight. */
export function Radios<T extends string>({ legend, value, options, onChange }: {
  legend: ReactNode; value: T; options: readonly (readonly [T, ReactNode])[]; onChange: (value: T) => void;
}) {
  const name = useId();
  return (
    <fieldset className="choices">
      <legend className="legend">{legend}</legend>
      {options.map(([option, label]) => (
        <label key={option} className="choice">
          <input type="radio" name={name} checked={value === option} onChange={() => onChange(option)} />{label}
        </label>
      ))}
    </fieldset>
  );
}

export function Check({ checked, onChange, children }: { checked: boolean; onChange: (checked: boolean) => void; children: ReactNode }) {
  return <label className="choice"><input type="checkbox" checked={checked} onChange={(e) => onChange(e.target.checked)} />{children}</label>;
}
