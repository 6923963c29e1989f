import type { Express, Request, Response } from "express";
import { noticeCatalogue, problemCatalogue } from "../problem/index.ts";

/** A page as web/ makes it: its text and the Content-Security-Policy that it is to be sent with. */
interface Page {
  readonly html: string;
  readonly contentSecurityPolicy: string;
}

interface ProblemKind {
  readonly code: string;
  readonly status: number;
  readonly title: string;
  readonly remedy: string;
}

interface NoticeKind {
  readonly code: string;
  readonly meaning: string;
}

/** Who makes the pages; the wiring brings web/ here. */
export interface PageMakers {
  documentPage(document: object, problems: readonly string[]): Page;
  problemsPage(problems: readonly ProblemKind[], notices: readonly NoticeKind[]): Page;
  problemPage(problem: ProblemKind): Page;
}

const problems: readonly ProblemKind[] = Object.entries(problemCatalogue).map(([code, kind]) => ({ code, ...kind }));
const notices: readonly NoticeKind[] = Object.entries(noticeCatalogue).map(([code, meaning]) => ({ code, meaning }));

const asJson = ({ code, ...kind }: ProblemKind) => ({ type: `/problems/${code}`, ...kind });

/** Addresses of the pages, for whoever asks with another method. */
export const pageAddresses: readonly string[] = [
  "/docs",
  "/problems",
  ...problems.map(({ code }) => `/problems/${code}`),
];

/** The pages of people: the interface, and the catalogue, which programs get as JSON. Each page is made once. */
export function addPages(app: Express, makers: PageMakers, document: () => object): void {
  const made = new Map<string, Page>();
  const send = (request: Request, response: Response, make: () => Page): void => {
    const page = made.get(request.path) ?? make();
    made.set(request.path, page);
    response.setHeader("Content-Security-Policy", page.contentSecurityPolicy);
    response.type("text/html").send(page.html);
  };
  app.get("/docs", (request, response) => {
    send(request, response, () =>
      makers.documentPage(
        document(),
        problems.map(({ code }) => code),
      ),
    );
  });
  const either = (path: string, json: object, make: () => Page): void => {
    app.get(path, (request, response) => {
      response.vary("Accept");
      if (request.accepts(["html", "json"]) === "json") response.json(json);
      else send(request, response, make);
    });
  };
  either("/problems", { problems: problems.map(asJson), notices }, () => makers.problemsPage(problems, notices));
  // A route for each code: whatever else is asked for below /problems is an unknown path like any other.
  for (const kind of problems) either(`/problems/${kind.code}`, asJson(kind), () => makers.problemPage(kind));
}
