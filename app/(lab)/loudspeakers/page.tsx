import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { LoudspeakerList } from "@/components/loudspeakers/loudspeaker-list";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Loudspeakers" };

export default async function LoudspeakersPage() {
  const caller = await getPageCaller();
  return <LoudspeakerList mayCapture={may(caller.roles, "capture")} />;
}
