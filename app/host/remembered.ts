/** Answers given for files of one layout, used for the next such file where its own setup says nothing. */
import type { Note } from "../../analysis/capture.ts";
import { mergeSetups } from "../../analysis/setup/merge.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import type { CaptureSource } from "./sources.ts";

/** Statements that answer a question of the reader: about the file, not about the bench. */
export const answerKeys = ["sampleInterval_s", "timeUnit", "decimalMark", "wide", "channels"] as const;

export type AnswerKey = (typeof answerKeys)[number];

export interface Remembered {
  key: AnswerKey;
  value: unknown;
  /** When it was answered, and in which run. */
  at: string;
  run: string;
}

/** The file with those answers to what was asked that its setup leaves open; null where there are none. */
export function withRemembered<File extends CaptureSource>(
  file: File,
  asked: string[],
  answers: Remembered[],
): File | null {
  const fitting = answers.filter(({ key }) => asked.includes(key));
  const answered = Object.fromEntries(fitting.map(({ key, value }) => [key, value])) as Setup;
  const setup = mergeSetups([file.setup, answered]);
  const used = fitting.filter(({ key }) => JSON.stringify(setup[key]) !== JSON.stringify(file.setup[key]));
  if (used.length === 0) return null;
  const origins = { ...file.origins };
  for (const { key } of used) origins[key] ??= "answered before";
  return { ...file, setup, origins, remembered: [...(file.remembered ?? []), ...used] };
}

const words: Record<AnswerKey, string> = {
  sampleInterval_s: "the sample interval",
  timeUnit: "the unit of time",
  decimalMark: "the decimal mark",
  wide: "what the many columns are",
  channels: "the channels' units and scales",
};

/** Says of a reading what in it rests on earlier answers. */
export function rememberedNote(remembered: Remembered[]): Note {
  const parts = remembered.map(
    ({ key, at, run }) => `${words[key]} (answered on ${at.slice(0, 10)} in the run "${run}")`,
  );
  return {
    code: "answered-before",
    text: `Taken from what you answered for files of this layout: ${parts.join(", ")}. State it anew where it does not hold for this file.`,
  };
}
