export { ingest, ingestBytes, type ChunkParser } from "./ingest.ts";
export { parseBulk, type BulkPlan, type ParsedChunk } from "./bulk.ts";
export type { ByteSource, CancelSignal } from "./source.ts";
export { decodeText } from "./encoding.ts";
export { PieceMemory } from "./memory.ts";
