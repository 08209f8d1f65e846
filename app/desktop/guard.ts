import type { IpcMainInvokeEvent, Session, WebContents } from "electron";

/** The page's own origin; nothing else is ever loaded into the window. */
export const pageOrigin = "ringbook://page";
export const pageAddress = `${pageOrigin}/index.html`;

const isOwnPage = (address: string) => address === pageOrigin || address.startsWith(`${pageOrigin}/`);

/** Calls are answered for the top frame of Ringbook's own page alone. */
export function isOwnSender(event: Pick<IpcMainInvokeEvent, "senderFrame">): boolean {
  const frame = event.senderFrame;
  return frame !== null && frame.parent === null && isOwnPage(frame.url);
}

/** No popup, no way off the page, no embedded view. */
export function lockContents(contents: WebContents): void {
  contents.setWindowOpenHandler(() => ({ action: "deny" }));
  contents.on("will-navigate", (event) => {
    if (!isOwnPage(event.url)) event.preventDefault();
  });
  contents.on("will-redirect", (event) => event.preventDefault());
  contents.on("will-attach-webview", (event) => event.preventDefault());
}

/** No permission but to put a copied figure on the clipboard, and that for the own page alone. */
export function lockSession(session: Session): void {
  session.setPermissionRequestHandler((contents, permission, answer) =>
    answer(allowed(permission, contents.getURL())),
  );
  session.setPermissionCheckHandler((_contents, permission, origin) => allowed(permission, origin));
  session.setDevicePermissionHandler(() => false);
}

const allowed = (permission: string, address: string) =>
  permission === "clipboard-sanitized-write" && isOwnPage(address);
