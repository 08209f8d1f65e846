import { builtinModules } from "node:module";
import react from "@vitejs/plugin-react";
import { defineConfig } from "vite";

// What stays outside the bundles: Node itself, Electron's runtime, and the SQLite package,
// whose prebuilt binaries must lie on disk as files.
const external = [
  ...builtinModules,
  ...builtinModules.map((name) => `node:${name}`),
  "electron",
  "@photostructure/sqlite",
];

// One output folder for all Node entries: a worker's URL is then a neighbour of whoever starts it.
const nodeEntries = {
  cli: "app/cli.ts",
  worker: "app/host/worker.ts",
  "parse-worker": "app/host/reading/parse-worker.ts",
  start: "app/start.ts",
  main: "app/desktop/main.ts",
};

export default defineConfig({
  root: "renderer",
  base: "./",
  plugins: [react()],
  environments: {
    client: {
      build: { outDir: "../dist/renderer", emptyOutDir: true, chunkSizeWarningLimit: 6000 },
    },
    node: {
      consumer: "server",
      resolve: { noExternal: true, external },
      build: {
        outDir: "../dist/app",
        emptyOutDir: true,
        target: "node20",
        minify: false,
        rollupOptions: {
          input: Object.fromEntries(
            Object.entries(nodeEntries).map(([name, path]) => [name, `${import.meta.dirname}/${path}`]),
          ),
          external,
          output: { format: "es", entryFileNames: "[name].js", chunkFileNames: "[name]-[hash].js" },
        },
      },
    },
    preload: {
      consumer: "server",
      resolve: { noExternal: true, external },
      build: {
        outDir: "../dist/preload",
        emptyOutDir: true,
        minify: false,
        rollupOptions: {
          input: { preload: `${import.meta.dirname}/app/desktop/preload.ts` },
          external,
          output: { format: "cjs", entryFileNames: "[name].cjs" },
        },
      },
    },
  },
  builder: {
    async buildApp(builder) {
      for (const environment of Object.values(builder.environments)) await builder.build(environment);
    },
  },
});
