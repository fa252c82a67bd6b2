import { TableFrame } from "../parts/table";

interface TokenHowToProps {
  /** Address of this host, without a slash at the end. */
  publicUrl: string;
}

const STEPS = [
  ["Who am I, in which lab, with which roles?", "/api/v1/session"],
  ["The series of the lab", "/api/v1/series"],
  ["The members and their roles", "/api/v1/members"],
] as const;

/** A token at work, in three lines to try. */
export function TokenHowTo({ publicUrl }: TokenHowToProps) {
  const lines = [
    "read -rs TOKEN   # paste the token, then Enter",
    ...STEPS.flatMap(([words, path]) => [
      "",
      `# ${words}`,
      `curl -H "Authorization: Bearer $TOKEN" \\`,
      `  ${publicUrl}${path}`,
    ]),
  ];
  return (
    <section aria-labelledby="how-to">
      <h2 id="how-to">How to use it</h2>
      <p className="mt-1 max-w-prose text-ink-2">
        Everything that a person does here a script can do, with a token in the header of each
        request. It may do what its roles allow, as far as its owner holds them at that moment.
      </p>
      <TableFrame label="Commands to try" className="mt-3 border border-rule bg-sheet">
        <pre className="figures px-4 py-3 text-[13px]/5">{lines.join("\n")}</pre>
      </TableFrame>
      <p className="mt-2 text-small text-ink-2">
        Every operation, with its fields and errors:{" "}
        <a href={`${publicUrl}/api/openapi.json`}>the OpenAPI document</a>.
      </p>
    </section>
  );
}
