import type { InputHTMLAttributes, ReactNode } from "react";
import { joinClasses } from "./join-classes";

interface CheckboxProps extends Omit<InputHTMLAttributes<HTMLInputElement>, "type"> {
  /** Words beside the box; for a box alone in a table row give `aria-label`. */
  children?: ReactNode;
  /** overprint: the box marks a selection by a person. */
  tone?: "ink" | "overprint";
  /** Words in the figure type: "H2". */
  figures?: boolean;
}

export function Checkbox({
  children,
  tone = "ink",
  figures = false,
  className,
  ...rest
}: CheckboxProps) {
  return (
    <label
      className={joinClasses(
        "inline-flex items-center gap-2 max-md:min-h-11",
        figures && "figures text-figure",
        className,
      )}
    >
      <span className="relative inline-grid size-[17px] flex-none place-items-center">
        <input
          type="checkbox"
          {...rest}
          className={joinClasses(
            "peer absolute inset-0 m-0 appearance-none rounded-control border-[1.5px] border-edge bg-sheet disabled:border-dashed",
            tone === "ink"
              ? "checked:border-ink checked:bg-ink"
              : "checked:border-overprint checked:bg-overprint",
          )}
        />
        <svg
          className={joinClasses(
            "pointer-events-none relative hidden peer-checked:block",
            tone === "ink" ? "text-on-ink" : "text-on-overprint",
          )}
          width="12"
          height="12"
          viewBox="0 0 14 14"
          aria-hidden="true"
        >
          <path d="M2 7.5 5.6 11 12 3.5" fill="none" stroke="currentColor" strokeWidth="2.4" />
        </svg>
      </span>
      {children}
    </label>
  );
}
