/** A letter as plain text, in lines that every mail program shows whole. */
import type { Letter } from "./letter";

const WIDTH = 72;

/** Breaks at blanks; a word that is longer, such as an address, stays whole. */
export function wrap(text: string, width = WIDTH): string {
  return text
    .split("\n")
    .map((line) => {
      const lines: string[] = [];
      let current = "";
      for (const word of line.split(" ")) {
        if (current !== "" && current.length + 1 + word.length > width) {
          lines.push(current);
          current = word;
        } else {
          current = current === "" ? word : `${current} ${word}`;
        }
      }
      return [...lines, current].join("\n");
    })
    .join("\n");
}

const toQuote = (words: string): string =>
  wrap(words.trim(), WIDTH - 2)
    .split("\n")
    .map((line) => (line === "" ? ">" : `> ${line}`))
    .join("\n");

export function toLetterText(letter: Letter): string {
  const { facts, quote, action, choicesUrl } = letter;
  const width = Math.max(0, ...facts.map(([label]) => label.length)) + 2;
  return [
    letter.sender,
    `${letter.heading}\n${"=".repeat(Math.min(WIDTH, letter.heading.length))}`,
    ...letter.paragraphs.map((paragraph) => wrap(paragraph)),
    ...(facts.length === 0
      ? []
      : [facts.map(([label, value]) => `${`${label}:`.padEnd(width)}${value}`).join("\n")]),
    ...(quote === null ? [] : [toQuote(quote)]),
    ...(action === null ? [] : [`${action.words}:\n${action.url}`]),
    ...letter.notes.map((note) => wrap(note)),
    `-- \n${wrap(letter.reason)}${choicesUrl === null ? "" : `\nChoose your notices: ${choicesUrl}`}\n`,
  ].join("\n\n");
}
