import { Check } from '../../components/ui/radios.js';
import { Popover, useClose } from '../../components/ui/popover.js';

type Options<T extends string> = readonly (readonly [T, string])[];

function OneOption({ label, chosen, choose }: { label: string; chosen: boolean; choose: () => void }) {
  const close = useClose();
  return <button type="button" className="option" aria-pressed={chosen} onClick={() => { choose(); close(); }}>{label}</button>;
}

/** A phrase of the sentence that is one of a list. */
export function One<T extends string>({ label, value, options, choose }: { label: string; value: string; options: Options<T>; choose: (value: T) => void }) {
  const shown = options.find(([option]) => option === value)?.[1] ?? 'one that is not in the list';
  return (
    <Popover label={label} openerClass="phrase" opener={<><span className="hidden-text">{label}: </span>{shown}</>}>
      {options.map(([option, text]) => <OneOption key={option} label={text} chosen={option === value} choose={() => choose(option)} />)}
    </Popover>
  );
}

function Clear({ none, clear }: { none: string; clear: () => void }) {
  const close = useClose();
  return <button type="button" className="option" onClick={() => { clear(); close(); }}>{none}</button>;
}

/** A phrase of the sentence that is any number of a list. */
export function Many<T extends string>({ label, none, values, options, choose }: {
  label: string; none: string; values: readonly T[]; options: Options<T>; choose: (values: T[] | undefined) => void;
}) {
  const names = options.filter(([option]) => values.includes(option)).map(([, text]) => text);
  const shown = names.length === 0 ? none : names.length > 3 ? `${names.length} of ${options.length}` : names.join(' or ');
  const toggle = (option: T, on: boolean): void => {
    const next = options.map(([o]) => o).filter((o) => (o === option ? on : values.includes(o)));
    choose(next.length === 0 ? undefined : next);
  };
  return (
    <Popover label={label} openerClass="phrase" opener={<><span className="hidden-text">{label}: </span>{shown}</>}>
      {values.length > 0 && <Clear none={none} clear={() => choose(undefined)} />}
      {options.map(([option, text]) => <Check key={option} checked={values.includes(option)} onChange={(on) => toggle(option, on)}>{text}</Check>)}
    </Popover>
  );
}
