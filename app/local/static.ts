import { readFile } from "node:fs/promises";
import { extname, join, normalize, sep } from "node:path";

export interface PageFile {
  mime: string;
  bytes: Buffer;
}

const mimes: Record<string, string> = {
  ".html": "text/html; charset=utf-8",
  ".js": "text/javascript; charset=utf-8",
  ".css": "text/css; charset=utf-8",
  ".svg": "image/svg+xml",
  ".png": "image/png",
  ".woff2": "font/woff2",
  ".json": "application/json",
  ".txt": "text/plain; charset=utf-8",
};

/** A file of the built page by its URL path; null when there is none or it lies outside the folder. */
export async function readPageFile(folder: string, urlPath: string): Promise<PageFile | null> {
  let path: string;
  try {
    path = decodeURIComponent(urlPath);
  } catch {
    return null;
  }
  const name = path === "/" ? "/index.html" : path;
  const mime = mimes[extname(name)];
  const file = normalize(join(folder, name));
  if (mime === undefined || name.includes("\0") || !file.startsWith(normalize(folder) + sep)) return null;
  try {
    return { mime, bytes: await readFile(file) };
  } catch {
    return null;
  }
}

/** The page's Content-Security-Policy; `connect` names what else than its own files it may talk to. */
export function pagePolicy(connect: string[]): string {
  return [
    "default-src 'self'",
    "script-src 'self'",
    "style-src 'self' 'unsafe-inline'",
    "img-src 'self' data: blob:",
    `connect-src ${["'self'", ...connect].join(" ")}`,
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'none'",
    "frame-ancestors 'none'",
  ].join("; ");
}
