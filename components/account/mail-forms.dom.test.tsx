// @vitest-environment happy-dom
/** What the account says about mail, answer by answer of a server that is not there. */
import { QueryClientProvider } from "@tanstack/react-query";
import { act, type ReactNode } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { ForgottenForm } from "../entry/forgotten-form";
import { makeQueryClient } from "../queries/query-provider";
import { AddressForm } from "./address-form";
import { NoticeChoices } from "./notice-choices";

let root: Root;
let page: HTMLElement;
let asked: { path: string; method: string; body: unknown }[];
/** Answers in their order. */
let answers: { status: number; body: unknown }[];

beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  asked = [];
  answers = [];
  Reflect.set(globalThis, "fetch", (path: string, init: RequestInit) => {
    const body: unknown = typeof init.body === "string" ? JSON.parse(init.body) : null;
    asked.push({ path, method: init.method ?? "GET", body });
    const answer = answers.shift() ?? { status: 202, body: null };
    return Promise.resolve(
      new Response(answer.body === null ? null : JSON.stringify(answer.body), {
        status: answer.status,
        headers: {
          "content-type": answer.status < 400 ? "application/json" : "application/problem+json",
        },
      }),
    );
  });
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

const settle = () => act(() => new Promise((resolve) => setTimeout(resolve, 30)));

async function show(what: ReactNode): Promise<void> {
  act(() =>
    root.render(<QueryClientProvider client={makeQueryClient()}>{what}</QueryClientProvider>),
  );
  await settle();
}

function field(name: string, text: string): void {
  const input = page.querySelector<HTMLInputElement>(`input[name="${name}"]`);
  if (input === null) throw new Error(`no field ${name}`);
  Reflect.set(HTMLInputElement.prototype, "value", text, input);
}

async function press(words: string): Promise<void> {
  const button = [...page.querySelectorAll("button")].find((b) => b.textContent === words);
  if (button === undefined) throw new Error(`no button ${words}`);
  act(() => button.click());
  await settle();
}

const text = (): string => page.textContent;

const problem = (code: string, status: number, errors?: unknown) => ({
  status,
  body: {
    type: "about:blank",
    title: "t",
    status,
    detail: "The detail.",
    instance: "/x",
    code,
    requestId: "12345678",
    ...(errors === undefined ? {} : { errors }),
  },
});

describe("the address", () => {
  const open = async (mailboxUrl: string | null = null): Promise<void> => {
    await show(<AddressForm email="bo@old.example" mailboxUrl={mailboxUrl} />);
    await press("Change the address");
    field("email", "bo@new.example");
    field("password", "a password");
  };

  it("is asked to be confirmed by mail", async () => {
    await open("http://127.0.0.1:4301");
    await press("Send the link");
    expect(asked).toEqual([
      {
        path: "/api/v1/account/address",
        method: "POST",
        body: { email: "bo@new.example", password: "a password" },
      },
    ]);
    expect(text()).toContain("A link went to bo@new.example.");
    expect(page.querySelector("a")?.href).toBe("http://127.0.0.1:4301/");
  });

  it.each([
    [problem("auth.wrong", 401), "This is not your present password."],
    [
      problem("request.invalid", 400, [{ path: "email", message: "is your present address" }]),
      "You sign in with this address already.",
    ],
    [
      problem("request.invalid", 400, [{ path: "email", message: "no" }]),
      "Enter an address such as name@lab.example.",
    ],
    [problem("auth.rate-limited", 429), "The detail."],
  ])("says what is wrong with it: %#", async (answer, words) => {
    await open();
    answers = [answer];
    await press("Send the link");
    expect(text()).toContain(words);
    expect(text()).not.toContain("A link went to");
  });
});

describe("a forgotten password", () => {
  it("is answered the same whatever the address, with the mailbox where there is one", async () => {
    await show(<ForgottenForm mailboxUrl="http://127.0.0.1:4301" />);
    field("email", " bo@old.example ");
    await press("Send the link");
    expect(asked[0]?.body).toEqual({ email: "bo@old.example" });
    expect(text()).toContain("If an account has the address bo@old.example, a link is on its way.");
    expect(text()).toContain("Mail of this installation is read in its local mailbox.");
  });

  it("says nothing of a mailbox where mail goes out", async () => {
    await show(<ForgottenForm mailboxUrl={null} />);
    field("email", "bo@old.example");
    await press("Send the link");
    expect(text()).not.toContain("mailbox");
  });
});

describe("notices", () => {
  const choices = (wanted: boolean) => ({
    status: 200,
    body: {
      notices: [
        { kind: "run-asked", wanted: true },
        { kind: "published", wanted },
      ],
    },
  });
  const boxes = () => [...page.querySelectorAll<HTMLInputElement>("input[type=checkbox]")];

  it("are saved as they are chosen", async () => {
    answers = [choices(true), choices(false)];
    await show(<NoticeChoices lab="Withy Lane" />);
    expect(boxes().map((box) => box.checked)).toEqual([true, true]);
    act(() => boxes()[1]?.click());
    await settle();
    expect(asked[1]).toMatchObject({
      method: "PATCH",
      body: { kind: "published", wanted: false },
    });
    expect(boxes().map((box) => [box.checked, box.disabled])).toEqual([
      [true, false],
      [false, false],
    ]);
  });

  it("stay as they were where the choice was not saved", async () => {
    answers = [choices(true), problem("internal", 500)];
    await show(<NoticeChoices lab="Withy Lane" />);
    act(() => boxes()[1]?.click());
    await settle();
    expect(text()).toContain("The choice was not saved. The detail.");
    expect(boxes()[1]?.checked).toBe(true);
  });

  it("say so where one's roles bring none", async () => {
    answers = [{ status: 200, body: { notices: [] } }];
    await show(<NoticeChoices lab="Withy Lane" />);
    expect(text()).toContain("Your roles in Withy Lane bring no notices");
  });
});
