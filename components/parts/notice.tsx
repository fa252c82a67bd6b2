import type { HearingNotice, NoticeSignal } from "@/lib/exposure/notices";
import { joinClasses } from "./join-classes";

const GROUND: Record<NoticeSignal, string> = { CAUTION: "bg-caution", WARNING: "bg-warning" };

/** The alert triangle: black, its mark in the colour behind it. */
function AlertTriangle({ size }: { size: number }) {
  return (
    <svg
      className="flex-none"
      width={size}
      height={(size * 22) / 24}
      viewBox="0 0 24 22"
      aria-hidden="true"
    >
      <path
        fill="#000"
        fillRule="evenodd"
        d="M12 1 23.2 21H.8zM10.7 7.5l.5 7h1.6l.5-7zM12 15.7a1.5 1.5 0 1 0 0 3 1.5 1.5 0 0 0 0-3z"
      />
    </svg>
  );
}

interface SlimNoticeProps {
  /** Signal word, hazard, consequence and method line; words come from lib/exposure. */
  notice: HearingNotice;
  className?: string;
}

/** One line, once in every view that shows a maximum level. Never dismissible, never themed. */
export function SlimNotice({ notice, className }: SlimNoticeProps) {
  return (
    <p
      role="note"
      className={joinClasses(
        "flex items-stretch border border-black bg-white text-[14px]/[19px] text-black",
        className,
      )}
    >
      <b
        className={joinClasses(
          "flex items-center gap-[7px] border-r border-black py-[5px] pr-3 pl-2.5 font-extrabold tracking-[0.02em] whitespace-nowrap",
          GROUND[notice.signal],
        )}
      >
        <AlertTriangle size={17} />
        {notice.signal}
      </b>
      <span className="px-3 py-[5px]">
        <b>{notice.lead}</b> {notice.text}
      </span>
    </p>
  );
}

interface BlockNoticeProps {
  notice: HearingNotice;
  /** The signal word above the text instead of beside it: for narrow columns. */
  stacked?: boolean;
  className?: string;
}

/** The signal word panel and its sentences, for the calculator and the plan. */
export function BlockNotice({ notice, stacked = false, className }: BlockNoticeProps) {
  return (
    <div
      role="note"
      className={joinClasses(
        "border-2 border-black bg-white text-[15px]/[20px] text-black",
        !stacked && "sm:grid sm:grid-cols-[auto_1fr]",
        className,
      )}
    >
      <p
        className={joinClasses(
          "flex items-center gap-[9px] border-b-2 border-black px-3.5 py-1.5 font-extrabold tracking-[0.02em]",
          stacked ? "text-[17px]/6" : "text-[20px]/6 sm:border-r-2 sm:border-b-0 sm:pr-[18px]",
          GROUND[notice.signal],
        )}
      >
        <AlertTriangle size={22} />
        {notice.signal}
      </p>
      <div className="px-4 pt-[11px] pb-3">
        <p>
          <b>{notice.lead}</b>
        </p>
        <p className="mt-0.5">{notice.text}</p>
      </div>
    </div>
  );
}
