// node bundle.mjs ENTRY.js OUT.js
// A module and what it imports as one classic script, which a policy can name by its
// hash and which a Blob worker can run.
import { build } from "esbuild";

const [entry, outfile] = process.argv.slice(2);
await build({
  entryPoints: [entry],
  outfile,
  bundle: true,
  format: "iife",
  target: ["chrome112", "firefox113", "safari16.4"],
  charset: "utf8",
  minifyWhitespace: true,
  minifySyntax: true,
  legalComments: "none",
  logLevel: "error",
});
