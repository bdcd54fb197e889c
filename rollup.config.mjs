// Bundles: dist/node (library, worker, command line; the package's dependencies stay imports) and
// dist/browser (library and worker, everything inside, no bundler needed). The WebAssembly is
// embedded as base64 and copied as files too.
import { copyFileSync, mkdirSync, readFileSync } from "node:fs";
import commonjs from "@rollup/plugin-commonjs";
import json from "@rollup/plugin-json";
import { nodeResolve } from "@rollup/plugin-node-resolve";
import terser from "@rollup/plugin-terser";
import esbuild from "rollup-plugin-esbuild";
import license from "rollup-plugin-license";

const manifest = JSON.parse(readFileSync(new URL("package.json", import.meta.url), "utf8"));
const external = [...Object.keys(manifest.dependencies), /^node:/];
const isExternal = (id) =>
  external.some((e) => (e instanceof RegExp ? e.test(id) : id === e || id.startsWith(`${e}/`)));

const plugins = (conditions, extra = []) => [
  nodeResolve({
    exportConditions: conditions,
    browser: conditions.includes("browser"),
    preferBuiltins: conditions.includes("node"),
    extensions: [".ts", ".js", ".mjs", ".json"],
  }),
  commonjs(),
  json(),
  esbuild({ target: "es2022", tsconfig: "tsconfig.json" }),
  ...extra,
];

const copyFiles = {
  name: "copy-files",
  writeBundle() {
    mkdirSync("dist/kernel", { recursive: true });
    for (const target of ["simd", "plain"]) copyFileSync(`build/${target}.wasm`, `dist/kernel/${target}.wasm`);
    copyFileSync("src/walk/walk.schema.json", "dist/walk.schema.json");
  },
};

// What the bundles carry of other packages, with their licences.
// Each licence's text once, under the packages that it is of.
const notices = (dir) => {
  const template = (packages) => {
    const named = new Map();
    for (const { name, version, license: kind, licenseText, noticeText } of packages) {
      const text = [licenseText ?? kind, noticeText].filter(Boolean).join("\n\n").trim();
      named.set(text, [...(named.get(text) ?? []), `${name} ${version} (${kind})`]);
    }
    return [...named].map(([text, names]) => `${names.sort().join("\n")}\n\n${text}\n`).join(`\n${"-".repeat(72)}\n\n`);
  };
  return license({ thirdParty: { output: { file: `${dir}/THIRD-PARTY.txt`, template } } });
};

const output = (dir) => ({
  dir,
  format: "es",
  sourcemap: true,
  entryFileNames: "[name].js",
  // Beside the entries: the worker is found relative to the chunk that starts it.
  chunkFileNames: "[name]-[hash].js",
});

// A package of a dependency may carry circular imports of its own; ours must have none.
const onwarn = (warning, warn) => {
  if (warning.code === "CIRCULAR_DEPENDENCY" && warning.ids?.every((id) => id.includes("node_modules"))) return;
  warn(warning);
};

export default [
  {
    input: { index: "src/index.ts", worker: "src/worker.ts", cli: "src/cli/main.ts" },
    external: isExternal,
    output: output("dist/node"),
    plugins: plugins(["node", "import", "default"], [copyFiles, notices("dist/node")]),
    treeshake: { moduleSideEffects: (id) => /\/src\/(worker|cli\/main)\.ts$|jobs\.ts$/.test(id) },
    onwarn,
  },
  {
    input: { index: "src/index.ts", worker: "src/worker.ts" },
    external: [],
    output: output("dist/browser"),
    plugins: plugins(["browser", "import", "default"], [terser(), notices("dist/browser")]),
    treeshake: { moduleSideEffects: (id) => /\/src\/worker\.ts$|jobs\.ts$/.test(id) },
    onwarn,
  },
];
