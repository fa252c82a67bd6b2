import type { Metadata } from "next";
import { getPageCallerWith } from "@/app/_server/page-caller";
import { FolderScreen } from "@/components/folder/folder-screen";
import { PageHead } from "@/components/frame/page-head";

export const metadata: Metadata = { title: "Series from a folder" };

export default async function FolderPage() {
  await getPageCallerWith("capture");
  return (
    <>
      <PageHead
        crumb={{ href: "/series/new", label: "New series", here: "from a folder" }}
        title="Series from a folder"
        line="nothing saved yet"
      />
      <FolderScreen />
    </>
  );
}
