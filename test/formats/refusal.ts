import { expect } from "vitest";
import { Problem } from "../../src/problem/index.ts";

/** The Problem that `work` throws; anything else, or nothing, fails the test. */
export function refusal(work: () => unknown): Problem {
  try {
    work();
  } catch (error) {
    expect(error).toBeInstanceOf(Problem);
    return error as Problem;
  }
  throw new Error("nothing was refused");
}

/** Expects an invalid-message whose sentence holds each of the parts. */
export function expectRefusal(work: () => unknown, ...parts: string[]): void {
  const problem = refusal(work);
  expect(problem.code).toBe("invalid-message");
  expect(problem.faults).toHaveLength(1);
  for (const part of parts) expect(problem.message).toContain(part);
}
