"use client";

import { useSyncExternalStore } from "react";

export type ColourScheme = "light" | "dark";

function subscribe(onChange: () => void): () => void {
  const device = matchMedia("(prefers-color-scheme: dark)");
  const page = new MutationObserver(onChange);
  page.observe(document.documentElement, { attributes: true, attributeFilter: ["data-theme"] });
  device.addEventListener("change", onChange);
  return () => {
    page.disconnect();
    device.removeEventListener("change", onChange);
  };
}

function read(): ColourScheme {
  const theme = document.documentElement.dataset.theme;
  if (theme === "light" || theme === "dark") return theme;
  return matchMedia("(prefers-color-scheme: dark)").matches ? "dark" : "light";
}

/** The scheme that the page shows now: canvases do not follow it by themselves. */
export const useColourScheme = (): ColourScheme =>
  useSyncExternalStore(subscribe, read, () => "light");
