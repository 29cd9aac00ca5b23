import type { Metadata, Viewport } from "next";
import { cookies } from "next/headers";
import type { ReactNode } from "react";
import { Textures } from "@/components/strip/textures";
import "./globals.css";

export const metadata: Metadata = {
  title: { default: "Longreed", template: "%s · Longreed" },
  description: "Long-run stability tests of resonant fluid sensors",
};

export const viewport: Viewport = {
  width: "device-width",
  initialScale: 1,
  themeColor: [
    { media: "(prefers-color-scheme: light)", color: "#eff3ec" },
    { media: "(prefers-color-scheme: dark)", color: "#0c1418" },
  ],
};

export default async function RootLayout({ children }: { children: ReactNode }) {
  const theme = (await cookies()).get("theme")?.value;
  return (
    <html lang="en" data-theme={theme === "light" || theme === "dark" ? theme : undefined}>
      <body>
        <Textures />
        {children}
      </body>
    </html>
  );
}
