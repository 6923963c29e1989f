import { connect, type Socket } from "node:net";

/**
 * A bounded number of POST requests over a few connections that stay open, each waiting for its answer: as little work as
 * can be on this side, so that the server is what is measured. HTTP/1.1 with Content-Length only, as both servers answer.
 */
const connections = 4;

export const asRequest = (path: string, body: string): Buffer =>
  Buffer.from(
    `POST ${path} HTTP/1.1\r\nHost: 127.0.0.1\r\nContent-Type: application/json\r\nContent-Length: ${Buffer.byteLength(body)}\r\n\r\n${body}`,
  );

/** Sends all requests; gives the time for them, ms. Errors: an answer that is not 200. */
export async function sendAll(port: number, requests: readonly Buffer[]): Promise<number> {
  const sockets = await Promise.all(Array.from({ length: connections }, () => open(port)));
  const start = performance.now();
  let next = 0;
  await Promise.all(
    sockets.map(async (socket) => {
      while (next < requests.length) await exchange(socket, requests[next++]!);
    }),
  );
  const time = performance.now() - start;
  for (const socket of sockets) socket.destroy();
  return time;
}

function open(port: number): Promise<Socket> {
  return new Promise((resolve, reject) => {
    const socket = connect(port, "127.0.0.1", () => resolve(socket));
    socket.setNoDelay(true).once("error", reject);
  });
}

function exchange(socket: Socket, request: Buffer): Promise<void> {
  return new Promise((resolve, reject) => {
    let head = "";
    let missing = Number.POSITIVE_INFINITY;
    const finish = (error?: Error): void => {
      socket.off("data", receive).off("close", gone);
      if (error) reject(error);
      else resolve();
    };
    const gone = (): void => finish(new Error("the server closed the connection"));
    const receive = (chunk: Buffer): void => {
      if (missing === Number.POSITIVE_INFINITY) {
        head += chunk.toString("latin1");
        const end = head.indexOf("\r\n\r\n");
        if (end < 0) return;
        const length = /\r\ncontent-length: *(\d+)/i.exec(head.slice(0, end));
        if (!head.startsWith("HTTP/1.1 200 ") || length === null) {
          finish(new Error(`not the answer that was expected: ${head.slice(0, 400)}`));
          return;
        }
        missing = Number(length[1]) - (head.length - end - 4);
      } else {
        missing -= chunk.length;
      }
      if (missing === 0) finish();
    };
    socket.on("data", receive).once("close", gone);
    socket.write(request);
  });
}
