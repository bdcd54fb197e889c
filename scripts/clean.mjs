// Chunks have hashes in their names: what an earlier build left must not be packed.
import { rmSync } from "node:fs";

rmSync("dist", { recursive: true, force: true });
