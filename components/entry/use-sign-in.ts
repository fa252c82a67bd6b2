"use client";

import { useMutation } from "@tanstack/react-query";
import { signIn } from "next-auth/react";
import { parseRefusal, toRefusalWords } from "@/lib/account/sign-in-refusal";

interface Credentials {
  email: string;
  password: string;
}

/** A sign-in that met another tab's fresh token answers 200 and has done nothing: once more then. */
const lostToken = (url: string | null): boolean => url?.includes("csrf=true") === true;

/** @throws Error whose message is the sentence for the form. */
export async function enter(credentials: Credentials): Promise<void> {
  const attempt = () => signIn("credentials", { ...credentials, redirect: false });
  let answer = await attempt();
  if (answer?.ok === true && lostToken(answer.url)) answer = await attempt();
  if (answer?.error !== undefined && answer.error !== null) {
    throw new Error(toRefusalWords(parseRefusal(answer.error)));
  }
  if (answer?.ok !== true || lostToken(answer.url)) {
    throw new Error(toRefusalWords({ code: "internal" }));
  }
}

/** @param next path of our own to go to; the page is loaded anew, with the session. */
export const useSignIn = (next: string) =>
  useMutation({ mutationFn: enter, onSuccess: () => window.location.assign(next) });
