import { beside } from "./beside.ts";
import { header } from "./header.ts";
import { pitfalls } from "./pitfalls.ts";
import { plain } from "./plain.ts";
import { records } from "./records.ts";
import { spelling } from "./spelling.ts";
import type { ShapeFile } from "./shape.ts";

export const shapes: ShapeFile[] = [...plain, ...header, ...beside, ...records, ...pitfalls, ...spelling];
