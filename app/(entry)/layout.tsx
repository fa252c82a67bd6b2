import type { ReactNode } from "react";
import { EntryArt } from "@/components/entry/entry-art";
import { Brand } from "@/components/frame/brand";

/** The way in: the form at the left, a wall at the right; on a phone the wall lies at the foot. */
export default function EntryLayout({ children }: { children: ReactNode }) {
  return (
    <div className="grid min-h-dvh bg-sheet lg:grid-cols-[560px_minmax(0,1fr)] max-lg:grid-rows-[1fr_auto]">
      <main className="flex flex-col px-[84px] py-9 max-lg:px-phone max-lg:py-5">
        <Brand size={28} />
        <div className="my-auto w-full max-w-[392px] py-12 max-lg:mx-auto max-lg:py-10">
          {children}
        </div>
      </main>
      <EntryArt />
    </div>
  );
}
