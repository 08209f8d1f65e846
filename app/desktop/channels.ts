/** Names of the IPC channels, known to the main process and the preload alone. */
export const callChannel = "ringbook:call";
export const eventChannel = "ringbook:event";
