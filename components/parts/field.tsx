import {
  useId,
  type InputHTMLAttributes,
  type ReactNode,
  type Ref,
  type SelectHTMLAttributes,
  type TextareaHTMLAttributes,
} from "react";
import { joinClasses } from "./join-classes";

/** What the control inside a field must carry. Spread it: `<TextInput {...props} {...register("serial")} />`. */
export interface ControlProps {
  id: string;
  "aria-describedby": string | undefined;
  "aria-invalid": true | undefined;
}

interface FieldProps {
  /** In the trade's words, unit included: "distance, m". */
  label: ReactNode;
  /** Shown once the field has been left with a fault. */
  error?: string | undefined;
  hint?: ReactNode;
  /** At the right end of the label line: "show". */
  aside?: ReactNode;
  className?: string;
  children: (props: ControlProps) => ReactNode;
}

/** Label above, control, then fault or hint, tied together for readers. */
export function Field({ label, error, hint, aside, className, children }: FieldProps) {
  const id = useId();
  const noteId = `${id}note`;
  const noted = error !== undefined || hint !== undefined;
  return (
    <div className={className}>
      <div className="mb-[5px] flex items-baseline justify-between gap-3">
        <label htmlFor={id} className="figures text-label font-medium text-ink-2">
          {label}
        </label>
        {aside}
      </div>
      {children({
        id,
        "aria-describedby": noted ? noteId : undefined,
        "aria-invalid": error === undefined ? undefined : true,
      })}
      {noted && (
        <p
          id={noteId}
          className={joinClasses(
            "mt-1",
            error === undefined ? "text-hint text-ink-2" : "text-[14px]/[19px] text-fault",
          )}
        >
          {error ?? hint}
        </p>
      )}
    </div>
  );
}

const CONTROL =
  "block w-full rounded-control border border-edge bg-sheet text-ink aria-invalid:border-fault aria-invalid:shadow-[inset_0_0_0_1px_var(--fault)] disabled:border-dashed disabled:bg-transparent disabled:text-ink-3";

/** normal: filters and dense places. form: 44 px, the height of forms. */
export type ControlSize = "normal" | "form";
const HEIGHT: Record<ControlSize, string> = {
  normal: "min-h-9 px-2.5 py-1.5 max-md:min-h-11",
  form: "min-h-11 px-3 py-2.5",
};

interface TextInputProps extends Omit<InputHTMLAttributes<HTMLInputElement>, "size"> {
  size?: ControlSize;
  /** Figures are set in the figure type: numbers, serials, file names. */
  figures?: boolean;
  ref?: Ref<HTMLInputElement>;
}

export function TextInput({ size = "form", figures = false, className, ...rest }: TextInputProps) {
  return (
    <input
      type="text"
      {...rest}
      className={joinClasses(
        CONTROL,
        HEIGHT[size],
        figures ? "figures text-[14px]/5" : "text-[15px]/5",
        className,
      )}
    />
  );
}

export function TextArea({ className, ...rest }: TextareaHTMLAttributes<HTMLTextAreaElement>) {
  return (
    <textarea
      rows={2}
      {...rest}
      className={joinClasses(CONTROL, "px-3 py-2.5 text-[15px]/5", className)}
    />
  );
}

interface SelectProps extends Omit<SelectHTMLAttributes<HTMLSelectElement>, "size"> {
  ref?: Ref<HTMLSelectElement>;
  size?: ControlSize;
  figures?: boolean;
}

/** The browser's own select under our looks: keyboard, phone wheels and readers come with it. */
export function Select({
  size = "form",
  figures = false,
  className,
  children,
  ...rest
}: SelectProps) {
  return (
    <span className={joinClasses("relative block", className)}>
      <select
        {...rest}
        className={joinClasses(
          CONTROL,
          HEIGHT[size],
          "appearance-none pr-8!",
          figures ? "figures text-[13px]/5" : "text-[15px]/5",
        )}
      >
        {children}
      </select>
      <svg
        className="pointer-events-none absolute top-1/2 right-3 -translate-y-1/2"
        width="10"
        height="7"
        viewBox="0 0 10 7"
        aria-hidden="true"
      >
        <path d="M1 1.2 5 5.4 9 1.2" fill="none" stroke="currentColor" strokeWidth="1.8" />
      </svg>
    </span>
  );
}
