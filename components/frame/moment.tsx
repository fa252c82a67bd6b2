"use client";

import { toDay, toLongDay, toClock, toMoment } from "@/lib/time/time-words";
import { useLabZone } from "./lab-session";
import { useNow } from "./use-now";

interface MomentProps {
  /** ISO 8601. */
  at: string;
  /** day: "11 May". moment: "today 10:42", else the day. */
  as?: "day" | "moment";
  className?: string;
}

/** A moment in the time zone of the lab; the full date and time stand in its title. */
export function Moment({ at, as = "moment", className }: MomentProps) {
  const zone = useLabZone();
  const now = useNow();
  return (
    <time
      dateTime={at}
      title={`${toLongDay(at, zone)}, ${toClock(at, zone)} ${zone}`}
      className={className}
    >
      {as === "day" ? toDay(at, now, zone) : toMoment(at, now, zone)}
    </time>
  );
}
