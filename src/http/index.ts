export { createHttpApp } from "./app.ts";
export { interfaceDocument } from "./interfaceDocument.ts";
