import "@fontsource-variable/atkinson-hyperlegible-next/wght.css";
import "@fontsource/roboto-mono/latin-400.css";
import "@fontsource/roboto-mono/latin-500.css";
import "@fontsource/roboto-mono/latin-600.css";
import "./globals.css";
import type { Metadata, Viewport } from "next";
import { cookies } from "next/headers";
import type { ReactNode } from "react";
import { parseTheme, THEME_COOKIE } from "@/lib/account/theme";
import { COLOURS } from "@/lib/charts/tokens";

export const metadata: Metadata = {
  title: { default: "Tidemark", template: "%s · Tidemark" },
  description: "The output-limit bench of an independent loudspeaker test lab.",
  icons: {
    icon: [{ url: "/icon.svg", type: "image/svg+xml" }],
    apple: "/apple-icon.png",
  },
};

export const viewport: Viewport = {
  themeColor: [
    { media: "(prefers-color-scheme: light)", color: COLOURS.page.light },
    { media: "(prefers-color-scheme: dark)", color: COLOURS.page.dark },
  ],
};

export default async function RootLayout({ children }: { children: ReactNode }) {
  const theme = parseTheme((await cookies()).get(THEME_COOKIE)?.value);
  return (
    <html lang="en-GB" data-theme={theme === "system" ? undefined : theme}>
      <body>{children}</body>
    </html>
  );
}
