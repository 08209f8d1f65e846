import type { IncomingMessage } from "node:http";
import { CallError } from "../host/failure.ts";

/** The whole body of a request; refused as soon as it is known or seen to be larger than `most` bytes. */
export async function readBody(request: IncomingMessage, most: number): Promise<Uint8Array> {
  const tooLarge = () =>
    new CallError("too-large", `more than ${Math.round(most / 1e6)} MB can't be sent. Open it by its path`);
  if (Number(request.headers["content-length"] ?? 0) > most) throw tooLarge();
  const parts: Buffer[] = [];
  let bytes = 0;
  for await (const part of request as AsyncIterable<Buffer>) {
    bytes += part.length;
    if (bytes > most) throw tooLarge();
    parts.push(part);
  }
  return new Uint8Array(Buffer.concat(parts));
}
