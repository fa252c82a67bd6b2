/** Where two plans differ, in words: for the person whose plan was overtaken by another's. */
import type { Plan } from "@/lib/series/plan-schema";

export interface PlanDifference {
  /** "distance_m of place" as people say it: "place, distance m". */
  field: string;
  theirs: string;
  mine: string;
}

/** Leaves that differ, in the order of the plan; lists are compared as a whole. */
export function toPlanDifferences(theirs: Plan, mine: Plan): PlanDifference[] {
  const left = new Map(toLeaves(theirs, []));
  const right = new Map(toLeaves(mine, []));
  return [...new Set([...left.keys(), ...right.keys()])].flatMap((field) => {
    // A plan from before something was asked says nothing of it.
    const a = left.get(field) ?? toWords(null);
    const b = right.get(field) ?? toWords(null);
    return a === b ? [] : [{ field, theirs: a, mine: b }];
  });
}

function toLeaves(value: unknown, path: readonly string[]): [string, string][] {
  if (value !== null && typeof value === "object" && !Array.isArray(value)) {
    return Object.entries(value).flatMap(([key, inner]) => toLeaves(inner, [...path, key]));
  }
  return [[path.map((part) => part.replaceAll("_", "\u00a0")).join(", "), toWords(value)]];
}

function toWords(value: unknown): string {
  if (value === null || value === undefined || value === "") return "nothing";
  if (typeof value === "boolean") return value ? "yes" : "no";
  if (typeof value === "string") return value;
  if (typeof value === "number") return String(value).replace("-", "\u2212");
  if (Array.isArray(value)) return value.length === 0 ? "none" : value.map(toItem).join("; ");
  return JSON.stringify(value);
}

function toItem(item: unknown): string {
  if (item === null || typeof item !== "object") return toWords(item);
  return Object.entries(item)
    .filter(([, inner]) => inner !== false && inner !== 0)
    .map(([key, inner]) =>
      inner === true ? key.replaceAll("_", " ") : `${key.replaceAll("_", " ")} ${toWords(inner)}`,
    )
    .join(", ");
}
