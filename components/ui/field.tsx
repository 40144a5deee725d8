import { type ComponentProps, type ReactNode, useId } from 'react';
import { cn } from './cn';

export interface FieldProps {
  label: ReactNode;
  /** One sentence under the label. */
  hint?: ReactNode;
  /** The sentence that says what to put right. */
  error?: string | undefined;
  /** Set at the label's right, such as "optional". */
  note?: ReactNode;
  fieldClass?: string;
}

/** What the control must carry so that label, hint and error belong to it. */
interface ControlProps {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

/** Label, hint and error round any control. */
export function Field({
  label,
  hint,
  error,
  note,
  fieldClass,
  children,
}: FieldProps & { children: (control: ControlProps) => ReactNode }) {
  const id = useId();
  const described = [hint ? `${id}-hint` : null, error ? `${id}-error` : null].filter(Boolean);
  return (
    <div className={cn('grid content-start gap-1.5', fieldClass)}>
      <div className="flex items-baseline justify-between gap-3">
        <label htmlFor={id} className="text-[14px] font-semibold">
          {label}
        </label>
        {note ? <span className="label font-normal text-ink-3">{note}</span> : null}
      </div>
      {hint ? (
        <p id={`${id}-hint`} className="-mt-1 text-[13.5px] text-ink-2">
          {hint}
        </p>
      ) : null}
      {children({
        id,
        'aria-describedby': described.length ? described.join(' ') : undefined,
        'aria-invalid': error ? true : undefined,
      })}
      {error ? (
        <p id={`${id}-error`} className="flex gap-2 text-[13.5px] font-medium text-light-ink">
          <span
            aria-hidden="true"
            className="mt-[5px] size-2.5 shrink-0 rounded-full border-2 border-light"
          />
          {error}
        </p>
      ) : null}
    </div>
  );
}

export const controlClass =
  'w-full min-h-10 rounded-[9px] border border-edge bg-sheet px-3 py-2 text-[15px] text-ink placeholder:text-ink-3 focus-visible:rounded-[9px] aria-invalid:border-light aria-invalid:shadow-[inset_0_0_0_1px_var(--light)] disabled:border-line disabled:bg-panel disabled:text-ink-3';

export function Input({
  label,
  hint,
  error,
  note,
  fieldClass,
  className,
  ...rest
}: FieldProps & ComponentProps<'input'>) {
  return (
    <Field {...{ label, hint, error, note, fieldClass }}>
      {(control) => <input className={cn(controlClass, className)} {...rest} {...control} />}
    </Field>
  );
}

export function Select({
  label,
  hint,
  error,
  note,
  fieldClass,
  className,
  children,
  ...rest
}: FieldProps & ComponentProps<'select'>) {
  return (
    <Field {...{ label, hint, error, note, fieldClass }}>
      {(control) => (
        <select className={cn(controlClass, className)} {...rest} {...control}>
          {children}
        </select>
      )}
    </Field>
  );
}

export function Textarea({
  label,
  hint,
  error,
  note,
  fieldClass,
  className,
  rows = 4,
  ...rest
}: FieldProps & ComponentProps<'textarea'>) {
  return (
    <Field {...{ label, hint, error, note, fieldClass }}>
      {(control) => (
        <textarea
          rows={rows}
          className={cn(controlClass, 'resize-y', className)}
          {...rest}
          {...control}
        />
      )}
    </Field>
  );
}

/** One choice of several shown side by side, or a tick: the whole label is the target. */
export function Choice({
  label,
  className,
  type = 'radio',
  ...rest
}: { label: ReactNode } & ComponentProps<'input'>) {
  return (
    <label
      className={cn(
        'inline-flex min-h-10 items-center gap-2.5 rounded-full px-3.5 py-1.5 text-[14.5px] font-medium shadow-[inset_0_0_0_1.5px_var(--line)]',
        'has-checked:bg-ink has-checked:text-sheet has-checked:shadow-none has-focus-visible:outline-[2.5px] has-focus-visible:outline-offset-2 has-focus-visible:outline-ink',
        className,
      )}
    >
      <input type={type} className="size-4 accent-current outline-none" {...rest} />
      {label}
    </label>
  );
}

/** The form's own refusal, above its button; announced when it appears. */
export function FormError({ children }: { children?: ReactNode }) {
  return (
    <div role="alert" className="empty:absolute">
      {children ? (
        <p className="rounded-well bg-light-soft px-3.5 py-2.5 text-[14px] font-medium text-ink">
          {children}
        </p>
      ) : null}
    </div>
  );
}
