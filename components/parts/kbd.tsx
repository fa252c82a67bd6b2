import { joinClasses } from "./join-classes";

/** A key's cap. `plain` takes the colour of the button that it stands on. */
export function Kbd({
  children,
  plain = false,
  className,
}: {
  children: string;
  plain?: boolean;
  className?: string;
}) {
  return (
    <kbd
      className={joinClasses(
        "figures rounded-key border border-b-2 px-[5px] text-[11px]/4 font-medium whitespace-nowrap",
        plain ? "border-current bg-transparent text-inherit" : "border-rule bg-sheet text-ink-2",
        className,
      )}
    >
      {children}
    </kbd>
  );
}
