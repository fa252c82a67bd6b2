import Link from "next/link";
import { useId, type ButtonHTMLAttributes, type ReactNode, type Ref } from "react";
import { joinClasses } from "./join-classes";

/**
 * main: one per view. decision: what a person puts there (overprint). second: outlined.
 * decision-second: outlined in overprint words. quiet: underlined.
 */
export type ButtonTone = "main" | "decision" | "second" | "decision-second" | "quiet";
export type ButtonSize = "small" | "normal" | "form";

const TONES: Record<ButtonTone, string> = {
  main: "border-ink bg-ink text-on-ink hover:border-ink-2 hover:bg-ink-2",
  decision: "border-overprint bg-overprint text-on-overprint",
  second: "border-edge bg-sheet text-ink hover:bg-wash",
  "decision-second": "border-edge bg-sheet text-overprint hover:bg-overprint-wash",
  quiet:
    "border-transparent bg-transparent text-ink underline decoration-1 underline-offset-3 hover:decoration-2 px-1.5!",
};

const SIZES: Record<ButtonSize, string> = {
  small: "min-h-[30px] px-2.5 py-[3px] text-small max-md:min-h-11",
  normal: "min-h-9 px-3.5 py-1.5 text-body max-md:min-h-11",
  form: "min-h-11 px-4 py-2 text-finding",
};

export const buttonClasses = (tone: ButtonTone, size: ButtonSize, extra?: string): string =>
  joinClasses(
    "inline-flex items-center justify-center gap-2 rounded-control border text-center font-semibold no-underline transition-colors duration-quick",
    SIZES[size],
    "font-semibold",
    TONES[tone],
    extra,
  );

interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  tone?: ButtonTone;
  size?: ButtonSize;
  /** Work under way: the button keeps its words, takes no second press, and says so to readers. */
  busy?: boolean;
  ref?: Ref<HTMLButtonElement>;
}

/** `<Button tone="main" onClick={save}>Save</Button>`. A button that cannot be used now is `Unavailable`. */
export function Button({
  tone = "second",
  size = "normal",
  busy = false,
  className,
  children,
  ...rest
}: ButtonProps) {
  return (
    <button
      type="button"
      {...rest}
      aria-busy={busy || undefined}
      disabled={rest.disabled === true || busy}
      className={buttonClasses(
        tone,
        size,
        joinClasses("disabled:cursor-default disabled:opacity-60", className),
      )}
    >
      {children}
    </button>
  );
}

interface LinkButtonProps {
  href: string;
  tone?: ButtonTone;
  size?: ButtonSize;
  className?: string;
  children: ReactNode;
  /** A file to save under this name; a plain link then, not a page of ours. */
  download?: string | true;
}

/** A link that looks like a button: it goes somewhere, it changes nothing. */
export function LinkButton({
  href,
  tone = "second",
  size = "normal",
  className,
  children,
  download,
}: LinkButtonProps) {
  const classes = buttonClasses(tone, size, className);
  if (download !== undefined) {
    return (
      <a href={href} download={download} className={classes}>
        {children}
      </a>
    );
  }
  return (
    <Link href={href} className={classes}>
      {children}
    </Link>
  );
}

interface UnavailableProps {
  children: ReactNode;
  /** Why, in a sentence; shown beside the button. */
  reason: string;
  size?: ButtonSize;
  className?: string;
}

/** A control that would puzzle if it were missing: dashed, with the reason beside it. */
export function Unavailable({ children, reason, size = "normal", className }: UnavailableProps) {
  const reasonId = useId();
  return (
    <span className={joinClasses("inline-flex flex-wrap items-center gap-3", className)}>
      <button
        type="button"
        aria-disabled="true"
        aria-describedby={reasonId}
        className={joinClasses(
          "inline-flex cursor-default! items-center justify-center rounded-control border border-dashed border-edge bg-transparent text-ink-3",
          SIZES[size],
          "font-semibold",
        )}
      >
        {children}
      </button>
      <span id={reasonId} className="text-small text-ink-2">
        {reason}
      </span>
    </span>
  );
}
