/** Where the window tests look for the machine's Chromium. */
export const chromiumPath = "/usr/bin/chromium";
