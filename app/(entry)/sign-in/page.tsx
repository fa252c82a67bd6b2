import type { Metadata } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { findPageCaller } from "@/app/_server/page-caller";
import { SignInForm } from "@/components/entry/sign-in-form";
import { toSafePath } from "@/lib/http/origin";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage({ searchParams }: PageProps<"/sign-in">) {
  const { next } = await searchParams;
  const path = toSafePath(typeof next === "string" ? next : null);
  if ((await findPageCaller()) !== null) redirect(path);
  return (
    <>
      <h1 className="text-entry max-lg:text-[32px]/[38px]">Sign in</h1>
      <p className="mt-1.5 mb-6.5 text-[16px]/6 text-ink-2">
        For the members of the lab. An admin invites new ones.
      </p>
      <SignInForm next={path} />
      <p className="mt-5 flex flex-wrap gap-x-5 gap-y-1">
        <Link href="/forgotten-password">Forgotten the password?</Link>
        <Link href="/published" prefetch={false}>
          Read published tests
        </Link>
      </p>
    </>
  );
}
