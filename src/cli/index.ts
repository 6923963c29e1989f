export { type CommandLineParts, runCommandLine } from "./program.ts";
export { correctionReport } from "./report.ts";
