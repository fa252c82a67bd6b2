/** From what stands in the outbox to a mail: subject, text and HTML. */
import { toTesterSignal } from "../exposure/notices";
import { toLongDay } from "../time/time-words";
import { toOneLine, type ComposedMail, type Letter } from "./letter";
import { toLetterHtml } from "./letter-html";
import { toLetterText } from "./letter-text";
import type { ContentOf, MailContent, MailKind } from "./mail-schema";
import { NOTICE_KINDS, NOTICES } from "./notices";

/** Where the product stands: links begin with it. */
interface Place {
  /** Without a slash at the end. */
  publicUrl: string;
}

type Draft = Partial<Letter> & Pick<Letter, "subject" | "heading" | "paragraphs">;
type Template<Kind extends MailKind> = (content: ContentOf<Kind>, place: Place) => Draft;

/** Paths of the pages that mails lead to; each ends with the secret of its link. */
export const LINK_PATHS = {
  invitation: "/invitation/",
  "password-reset": "/reset-password/",
  "address-change": "/confirm-address/",
} as const satisfies Partial<Record<MailKind, string>>;

const NOTHING_TO_DO =
  "If this was not you, there is nothing to do: without the link nothing happens.";

const toSeriesUrl = ({ publicUrl }: Place, seriesId: string, tab: string): string =>
  `${publicUrl}/series/${seriesId}/${tab}`;

interface AboutSeries {
  lab: string;
  series: string;
  loudspeaker: string;
}

const nameOf = ({ series, loudspeaker }: AboutSeries): string => `${series} ${loudspeaker}`;

const seriesFacts = (content: AboutSeries): [string, string][] => [
  ["loudspeaker", content.loudspeaker],
  ["series", content.series],
];

const invitation: Template<"invitation"> = (content, { publicUrl }) => ({
  subject: `${content.lab} invites you to Tidemark`,
  sender: content.lab,
  heading: `Join ${content.lab}`,
  paragraphs: [
    `${content.name === "" ? "Hello" : `Hello ${content.name}`}, ${
      content.invited_by === null ? "you are invited" : `${content.invited_by} invites you`
    } to ${content.lab} as ${content.roles.join(", ")}.`,
    "Tidemark is the output-limit bench of the lab: it measures how loud a loudspeaker can play, where it gives out first, and why.",
  ],
  action: {
    words: `Join ${content.lab}`,
    url: `${publicUrl}${LINK_PATHS.invitation}${content.secret}`,
  },
  notes: [
    `If this address has no account yet, you choose a password there. The link works once, until ${toLongDay(content.expires_at, content.time_zone)}.`,
  ],
  reason: `It came to this address because an admin of ${content.lab} entered it.`,
});

const passwordReset: Template<"password-reset"> = (content, { publicUrl }) => ({
  subject: "Set a new password",
  heading: "Set a new password",
  paragraphs: [
    `Hello ${content.name}, somebody asked for a new password for the account with this address.`,
  ],
  action: {
    words: "Set a new password",
    url: `${publicUrl}${LINK_PATHS["password-reset"]}${content.secret}`,
  },
  notes: ["The link works once, for one hour. Every session then ends.", NOTHING_TO_DO],
});

const addressChange: Template<"address-change"> = (content, { publicUrl }) => ({
  subject: "Confirm your new address",
  heading: "Confirm your new address",
  paragraphs: [
    `Hello ${content.name}, you asked to sign in with this address from now on.`,
    `Until you confirm it, ${content.old_address} stays in force.`,
  ],
  action: {
    words: "Confirm this address",
    url: `${publicUrl}${LINK_PATHS["address-change"]}${content.secret}`,
  },
  notes: ["The link works once, for one day.", NOTHING_TO_DO],
});

const addressChanged: Template<"address-changed"> = (content) => ({
  subject: "Your sign-in address was changed",
  heading: "Your sign-in address was changed",
  paragraphs: [
    `Hello ${content.name}, your account is now signed in to with ${content.new_address}, no longer with this address.`,
  ],
  notes: ["If this was not you, tell an admin of your lab at once."],
});

const addressTaken: Template<"address-taken"> = (_content, { publicUrl }) => ({
  subject: "This address has an account already",
  heading: "This address has an account already",
  paragraphs: [
    "Somebody asked to use this address for another account. It has an account already, so nothing was changed.",
  ],
  action: { words: "Sign in", url: `${publicUrl}/sign-in` },
  notes: ["If this was not you, there is nothing to do."],
});

const analysisFailed: Template<"analysis-failed"> = (content, place) => ({
  subject: `${nameOf(content)}: the analysis failed`,
  heading: "The analysis failed",
  paragraphs: [content.message, content.remedy],
  facts: [
    ...seriesFacts(content),
    ["version", String(content.version)],
    ...(content.file === null ? [] : [["recording", content.file] as [string, string]]),
    ["report", content.report],
  ],
  action: {
    words: "Look at the recordings",
    url: toSeriesUrl(place, content.series_id, "runs"),
  },
});

const readyForReview: Template<"ready-for-review"> = (content, place) => ({
  subject: `${nameOf(content)} is ready for review`,
  heading: "Ready for review",
  paragraphs: ["The analysis is done. Each band has its evidence and waits for a decision."],
  facts: [...seriesFacts(content), ["version", String(content.version)]],
  action: {
    words: "Review the bands",
    url: toSeriesUrl(place, content.series_id, "output-limit"),
  },
});

const runAsked: Template<"run-asked"> = (content, place) => {
  // As if one stood at 1 m: never less than what is heard.
  const signal = toTesterSignal({ levelAtTesterDbA: content.level_dB, dose: 0 });
  return {
    subject: `${nameOf(content)}: a run is asked for`,
    heading: `${content.by} asks for a run`,
    paragraphs: [
      "It stands in the plan of the series, so that it can be recorded as the others are.",
    ],
    facts: [
      ...seriesFacts(content),
      ["run", content.label],
      ["level", `${content.level_dB} dB SPL at 1 m`],
    ],
    quote: content.reason,
    action: { words: "Open the runs", url: toSeriesUrl(place, content.series_id, "runs") },
    notes:
      signal === null
        ? []
        : [
            `${signal}: such a level can harm hearing. Wear hearing protection or leave the room. The plan tells the dose of the session.`,
          ],
  };
};

const signedOff: Template<"signed-off"> = (content, place) => ({
  subject: `${nameOf(content)} is signed off`,
  heading: "Signed off",
  paragraphs: [
    `${content.by} decided every band and signed off. The series can be published by this criterion.`,
  ],
  facts: [
    ...seriesFacts(content),
    ["version", String(content.version)],
    ["criterion", content.criterion],
  ],
  action: { words: "Open the summary", url: toSeriesUrl(place, content.series_id, "summary") },
});

const reopened: Template<"reopened"> = (content, place) => ({
  subject: `${nameOf(content)} is open again`,
  heading: "A signed-off series is open again",
  paragraphs: [
    `${content.by} took the sign-off of version ${content.version} back. It cannot be published until it is signed off anew; what is published stays as it is.`,
  ],
  facts: seriesFacts(content),
  quote: content.reason,
  action: { words: "Open the series", url: toSeriesUrl(place, content.series_id, "output-limit") },
});

const published: Template<"published"> = (content, place) => {
  const waits =
    content.embargo_until === null
      ? null
      : `Readers see it from ${toLongDay(content.embargo_until, content.time_zone)} on; until then there is nothing at its address.`;
  return {
    subject: `${nameOf(content)} is published`,
    heading: content.revision === 1 ? "Published" : `Published anew: revision ${content.revision}`,
    paragraphs: [
      `${content.by} published the result of this series.`,
      ...(waits === null ? [] : [waits]),
    ],
    facts: [...seriesFacts(content), ["revision", String(content.revision)]],
    quote: content.change_note,
    action:
      waits === null
        ? { words: "Open the page", url: `${place.publicUrl}${content.path}` }
        : { words: "Open the summary", url: toSeriesUrl(place, content.series_id, "summary") },
  };
};

const makerComment: Template<"maker-comment"> = (content, place) => ({
  subject: `${nameOf(content)}: a comment from the maker`,
  heading: `${content.from} comments`,
  paragraphs: ["It was left on a preview of the page. You can answer it, and print the answer."],
  facts: seriesFacts(content),
  quote: content.comment,
  action: { words: "Answer the comment", url: toSeriesUrl(place, content.series_id, "summary") },
});

const TEMPLATES: { readonly [Kind in MailKind]: Template<Kind> } = {
  invitation,
  "password-reset": passwordReset,
  "address-change": addressChange,
  "address-changed": addressChanged,
  "address-taken": addressTaken,
  "analysis-failed": analysisFailed,
  "ready-for-review": readyForReview,
  "run-asked": runAsked,
  "signed-off": signedOff,
  reopened,
  published,
  "maker-comment": makerComment,
};

/** @param content as it stands in the outbox. */
export function composeMail(content: MailContent, place: Place): ComposedMail {
  // The kind picks the template that takes this very content.
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion
  const template = TEMPLATES[content.kind] as (content: MailContent, place: Place) => Draft;
  const draft = template(content, place);
  const kind = NOTICE_KINDS.find((one) => one === content.kind);
  const letter: Letter = {
    sender: "lab" in content ? content.lab : "the output-limit bench",
    facts: [],
    quote: null,
    action: null,
    notes: [],
    reason:
      kind === undefined || !("lab" in content)
        ? "It came to this address because an account has it, or asked for it."
        : `You hear of this as ${NOTICES[kind].roles.join(" or ")} of ${content.lab}.`,
    choicesUrl: kind === undefined ? null : `${place.publicUrl}/account`,
    ...draft,
    subject: toOneLine(draft.subject),
  };
  return { subject: letter.subject, text: toLetterText(letter), html: toLetterHtml(letter) };
}
