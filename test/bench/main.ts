/** `npm run bench [name…]`: every benchmark, or those named, one after another in one process. */
const benches = {
  ingest: () => import("./ingest.ts"),
  ring: () => import("./ring.ts"),
  spark: () => import("./spark.ts"),
  book: () => import("./book.ts"),
  window: () => import("./window.ts"),
} as const;

async function main(asked: string[]): Promise<void> {
  const unknown = asked.filter((name) => !(name in benches));
  if (unknown.length > 0) {
    console.error(`no such benchmark: ${unknown.join(", ")}; there are ${Object.keys(benches).join(", ")}`);
    process.exit(2);
  }

  for (const [name, load] of Object.entries(benches)) {
    if (asked.length > 0 && !asked.includes(name)) continue;
    console.log(`\n== ${name}`);
    await (await load()).run();
  }
}

main(process.argv.slice(2)).catch((error) => {
  console.error(error);
  process.exitCode = 1;
});
