/** Many columns of like range: channels of one record, or one shot each? The file cannot say. */
import type { Note } from "../capture.ts";
import type { Setup } from "../setup/schema.ts";
import type { RawChannel } from "./channel.ts";

const fewestShots = 9;

export function wideNote(channels: RawChannel[], setup: Setup): Note | null {
  if (channels.length < fewestShots) return null;
  if (setup.wide)
    return { code: "wide-columns", text: `${channels.length} columns, read as ${setup.wide} as stated.` };
  return {
    code: "wide-columns",
    text: `${channels.length} value columns: they may be channels of one record or one shot each; taken as channels.`,
    question: "Are the columns channels of one record or shots?",
    choices: ["channels", "shots"],
    answers: "wide",
  };
}

/** One list of channels a record. */
export function shotChannels(channels: RawChannel[], setup: Setup, wide: boolean): RawChannel[][] {
  if (!wide || setup.wide !== "shots") return [channels];
  return channels.map((channel) => [{ ...channel, position: 0 }]);
}
