import net from "node:net";

/** Whether a port of a host can be listened on now. */
export function isFree(port, host = "127.0.0.1") {
  return new Promise((resolve, reject) => {
    const probe = net.createServer();
    probe.once("error", (error) => { if (error.code === "EADDRINUSE" || error.code === "EACCES") resolve(false); else reject(error); });
    probe.listen({ port, host, exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/** The first free port from `first` upward. */
export async function freePort(first, host = "127.0.0.1") {
  for (let port = first; port < 65_536; port++) if (await isFree(port, host)) return port;
  throw new Error(`no free port from ${first} upward`);
}
