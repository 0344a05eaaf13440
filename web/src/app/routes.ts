// Where the person is, kept in the address after '#', so that back and reload do what people expect.

export type Route =
  | { page: "jobs" }
  | { page: "kept" }
  | { page: "help" }
  | { page: "import" }
  | { page: "demo"; name: string }
  | { page: "wall"; job: string }
  | { page: "joint"; job: string; joint: string }
  | { page: "face"; job: string; joint: string }
  | { page: "sheet"; job: string; joint: string | null }
  | { page: "takeoff"; job: string }
  | { page: "cure"; job: string }
  | { page: "history"; job: string };

export function parseRoute(hash: string): Route {
  const parts = hash.replace(/^#?\/?/, "").split("/").filter(Boolean).map(decode);
  const [head, id, part, sub, last] = parts;
  if (head === "kept" || head === "help" || head === "import") return { page: head };
  if (head === "demo") return { page: "demo", name: id ?? "" };
  if (head !== "job" || id === undefined) return { page: "jobs" };
  if (part === "joint" && sub !== undefined) return { page: last === "face" ? "face" : "joint", job: id, joint: sub };
  if (part === "sheet") return { page: "sheet", job: id, joint: sub ?? null };
  if (part === "takeoff") return { page: "takeoff", job: id };
  if (part === "cure") return { page: "cure", job: id };
  if (part === "history") return { page: "history", job: id };
  return { page: "wall", job: id };
}

export function href(route: Route): string {
  switch (route.page) {
    case "jobs":
      return "#/";
    case "kept":
    case "help":
    case "import":
      return `#/${route.page}`;
    case "demo":
      return route.name ? `#/demo/${code(route.name)}` : "#/demo";
    case "wall":
      return `#/job/${code(route.job)}`;
    case "joint":
      return `#/job/${code(route.job)}/joint/${code(route.joint)}`;
    case "face":
      return `#/job/${code(route.job)}/joint/${code(route.joint)}/face`;
    case "sheet":
      return `#/job/${code(route.job)}/sheet${route.joint === null ? "" : "/" + code(route.joint)}`;
    case "takeoff":
      return `#/job/${code(route.job)}/takeoff`;
    case "cure":
      return `#/job/${code(route.job)}/cure`;
    case "history":
      return `#/job/${code(route.job)}/history`;
  }
}

/** The job that a page belongs to, or null. */
export function jobOf(route: Route): string | null {
  return "job" in route ? route.job : null;
}

const code = encodeURIComponent;

function decode(text: string): string {
  try {
    return decodeURIComponent(text);
  } catch {
    return text;
  }
}
