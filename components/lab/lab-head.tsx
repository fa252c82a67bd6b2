"use client";

import { useMay } from "../frame/lab-session";
import { PageHead } from "../frame/page-head";
import { Tabs } from "../parts/tabs";

const FOR_ALL = [
  { href: "/members", label: "Members" },
  { href: "/lab/tokens", label: "Tokens" },
  { href: "/lab", label: "Settings" },
  { href: "/lab/engine", label: "Engine" },
] as const;
const KEEPING = { href: "/lab/keeping", label: "Keeping" } as const;
const TRAIL = { href: "/lab/trail", label: "Trail" } as const;

/** The head of every page about the lab itself. */
export function LabHead({ title, line }: { title: string; line?: string | undefined }) {
  const mayAdminister = useMay("administer");
  return (
    <>
      <PageHead title={title} line={line ?? " "} />
      <div className="mb-5 border-b border-rule px-gutter max-md:px-phone">
        <Tabs
          label="Pages about the lab"
          tabs={mayAdminister ? [...FOR_ALL, KEEPING, TRAIL] : FOR_ALL}
          className="-mb-px"
        />
      </div>
    </>
  );
}
