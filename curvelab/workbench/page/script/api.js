// The one door to the process: the same HTTP interface other programs use.

export class Refusal extends Error {
  constructor(status, { problem, expected = "", fix = "" }) {
    super(problem);
    Object.assign(this, { status, problem, expected, fix });
  }

  get line() {
    return [this.problem, this.expected && `Expected: ${this.expected}`, this.fix]
      .filter(Boolean)
      .map(sentence)
      .join(" ");
  }
}

function sentence(text) {
  return /[.!?…]$/.test(text) ? text : `${text}.`;
}

function token() {
  const given = new URLSearchParams(location.hash.slice(1)).get("token");
  if (given) {
    sessionStorage.setItem("curvelab-token", given);
    history.replaceState(null, "", "#/");
  }
  return sessionStorage.getItem("curvelab-token");
}

const TOKEN = token();

async function send(method, path, { body, signal, raw } = {}) {
  const headers = { Accept: "application/json" };
  if (method !== "GET") headers["X-Curvelab"] = "1";
  if (TOKEN) headers.Authorization = `Bearer ${TOKEN}`;
  if (body !== undefined) headers["Content-Type"] = raw ? "application/octet-stream" : "application/json";
  let answer;
  try {
    answer = await fetch(`/api${path}`, { method, headers, signal, body: raw ? body : body && JSON.stringify(body) });
  } catch (error) {
    if (error.name === "AbortError") throw error;
    throw new Refusal(0, {
      problem: "The workbench process does not answer",
      fix: "Start curvelab workbench again; nothing is lost",
    });
  }
  const json = answer.headers.get("Content-Type")?.includes("json") ? await answer.json().catch(() => null) : null;
  if (!answer.ok)
    throw new Refusal(answer.status, json?.error ?? { problem: `The process refused with status ${answer.status}` });
  return json;
}

export const get = (path, options) => send("GET", path, options);
export const post = (path, body = {}, options) => send("POST", path, { ...options, body });
export const postBytes = (path, bytes, options) => send("POST", path, { ...options, body: bytes, raw: true });
export const remove = (path) => send("DELETE", path);

/** `path?name=value&...` without what is empty; a list gives the name once for each. */
export function query(path, values) {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(values)) {
    for (const each of Array.isArray(value) ? value : [value]) {
      if (each !== null && each !== undefined && each !== "") search.append(name, each);
    }
  }
  const text = search.toString();
  return text ? `${path}?${text}` : path;
}

export const part = encodeURIComponent;
