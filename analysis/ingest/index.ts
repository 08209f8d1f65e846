export { ingest, ingestBytes, type ChunkParser, type Ingested, type IngestOptions } from "./ingest.ts";
export { parseBulk, type BulkPlan, type ParsedChunk } from "./bulk.ts";
export { bytesSource, type ByteSource, type CancelSignal } from "./source.ts";
