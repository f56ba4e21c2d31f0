// The address says where one is: #/, #/sheet/ID, #/library, #/device/KEY, each with its ?name=value pairs.

export function here() {
  const [path, search] = location.hash.replace(/^#\/?/, "").split("?");
  const [view = "", ...rest] = path.split("/");
  return {
    view: view || "start",
    rest: rest.map(decoded),
    values: Object.fromEntries(new URLSearchParams(search ?? "")),
  };
}

function decoded(text) {
  try {
    return decodeURIComponent(text);
  } catch {
    return text;
  }
}

/** Write values into the address without leaving an entry in the browser's history; null takes one out. */
export function keepPlace(values) {
  const [path, search] = location.hash.split("?");
  const kept = new URLSearchParams(search ?? "");
  for (const [name, value] of Object.entries(values))
    value === null || value === "" ? kept.delete(name) : kept.set(name, value);
  const text = kept.toString();
  history.replaceState(null, "", `${path || "#/"}${text ? `?${text}` : ""}`);
}
