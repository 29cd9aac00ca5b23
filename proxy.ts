import { type NextRequest, NextResponse } from "next/server";

/**
 * Gives each page a Content-Security-Policy with a nonce of its own, which Next.js puts on its scripts, and tells the page
 * its address, so that a sign-in can lead back to it. Calls and files do not pass here: bodies of uploads stay untouched.
 */
export function proxy(request: NextRequest): NextResponse {
  const nonce = btoa(crypto.randomUUID());
  const policy = contentSecurityPolicy(nonce);
  const headers = new Headers(request.headers);
  headers.set("x-nonce", nonce);
  headers.set("x-path", request.nextUrl.pathname + request.nextUrl.search);
  headers.set("Content-Security-Policy", policy);

  const response = NextResponse.next({ request: { headers } });
  response.headers.set("Content-Security-Policy", policy);
  if (process.env.APP_URL?.startsWith("https://")) response.headers.set("Strict-Transport-Security", "max-age=31536000");
  return response;
}

/** Styles may be inline: charts and strips place their marks by style attributes, which no nonce can cover. */
function contentSecurityPolicy(nonce: string): string {
  const development = process.env.NODE_ENV === "development";
  return [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'${development ? " 'unsafe-eval'" : ""}`,
    "style-src 'self' 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    `connect-src 'self'${development ? " ws:" : ""}`,
    "worker-src 'self' blob:",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join("; ");
}

export const config = {
  matcher: [{ source: "/((?!api/|_next/|fonts/|icon|favicon).*)", missing: [{ type: "header", key: "next-router-prefetch" }] }],
};
