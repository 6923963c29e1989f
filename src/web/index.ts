export { documentPage } from "./documentPage.ts";
export { problemPage, problemsPage } from "./problemPages.ts";
