/* Small helps for pages that work without them: ask before grave acts, add rows, set the time to
   now, send once, and keep what was typed until it is recorded. */

const KEPT_FOR = 24 * 60 * 60 * 1000;
const WAIT = 400;
const SENT = "lot-book:sent";
const PREFIX = "lot-book:draft:";

const all = (selector, within = document) => [...within.querySelectorAll(selector)];

/* Storage may be full or switched off; the page goes on without it. */
function attempt(work, otherwise = null) {
  try {
    return work();
  } catch {
    return otherwise;
  }
}

/* ---- ask before grave acts; send once ---- */

const sending = new WeakSet();

document.addEventListener("submit", (event) => {
  const form = event.target;
  const question = event.submitter?.dataset.confirm ?? form.dataset.confirm;
  if (sending.has(form) || (question && !window.confirm(question))) {
    event.preventDefault();
    return;
  }
  if (form.method !== "post" || form.target) return;
  sending.add(form);
  event.submitter?.setAttribute("aria-busy", "true");
});

window.addEventListener("pageshow", () => {
  for (const form of document.forms) sending.delete(form);
  for (const button of all("[aria-busy]")) button.removeAttribute("aria-busy");
});

/* ---- rows of a formset ---- */

function addRow(prefix) {
  const total = document.getElementById(`id_${prefix}-TOTAL_FORMS`);
  const template = document.getElementById(`${prefix}-template`);
  const rows = document.getElementById(`${prefix}-rows`);
  const most = Number(document.getElementById(`id_${prefix}-MAX_NUM_FORMS`)?.value ?? 1000);
  if (!total || !template || !rows || Number(total.value) >= most) return null;
  const holder = document.createElement("template");
  holder.innerHTML = template.innerHTML.replaceAll("__prefix__", total.value);
  const first = holder.content.firstElementChild;
  rows.append(holder.content);
  total.value = Number(total.value) + 1;
  showHelps(rows);
  return first;
}

/* ---- the time where the facility is ---- */

function timeThere(moment) {
  const timeZone = document.body.dataset.zone || undefined;
  const parts = new Intl.DateTimeFormat("en-CA", {
    timeZone, hourCycle: "h23", year: "numeric", month: "2-digit", day: "2-digit",
    hour: "2-digit", minute: "2-digit",
  }).formatToParts(moment);
  const part = (type) => parts.find((entry) => entry.type === type).value;
  return { date: `${part("year")}-${part("month")}-${part("day")}`, time: `${part("hour")}:${part("minute")}` };
}

function setToNow(input) {
  const { date, time } = timeThere(new Date());
  const values = { "datetime-local": `${date}T${time}`, date, time };
  input.value = values[input.type] ?? `${date} ${time}`;
  input.dispatchEvent(new Event("input", { bubbles: true }));
}

document.addEventListener("click", (event) => {
  const button = event.target.closest("[data-add-row], [data-now], [data-print]");
  if (!button) return;
  if ("addRow" in button.dataset) {
    addRow(button.dataset.addRow)?.querySelector("input:not([type=hidden]), select")?.focus();
  } else if ("now" in button.dataset) {
    const input = document.getElementById(button.dataset.now);
    if (input) setToNow(input);
  } else {
    window.print();
  }
});

/* Buttons that need this script stand hidden until it runs. */
function showHelps(within = document) {
  for (const button of all("[data-add-row][hidden], [data-now][hidden], [data-print][hidden]", within)) {
    button.hidden = false;
  }
}

/* ---- a wide picture opens where the lot asked for stands ---- */

function showAsked(region) {
  const box = document.getElementById(region.dataset.show)?.getBoundingClientRect();
  if (!box) return;
  const frame = region.getBoundingClientRect();
  region.scrollLeft += box.left + box.width / 2 - frame.left - frame.width / 2;
  region.scrollTop += box.top + box.height / 2 - frame.top - frame.height / 2;
}

/* ---- drafts: <form data-draft="client"> names the hidden input that carries the client id ---- */

const LEAVE_OUT = new Set(["password", "file"]);

function entries(form, idName) {
  const kept = [];
  for (const input of form.elements) {
    if (!input.name || LEAVE_OUT.has(input.type) || input.name === "csrfmiddlewaretoken") continue;
    if (input.name === idName || input.type === "submit" || input.type === "button") continue;
    if ((input.type === "checkbox" || input.type === "radio") && !input.checked) continue;
    if (input.type === "select-multiple") {
      for (const option of input.selectedOptions) kept.push([input.name, option.value]);
    } else {
      kept.push([input.name, input.value]);
    }
  }
  return kept;
}

function restore(form, idInput, draft) {
  for (const [name, value] of draft.entries) {
    if (!name.endsWith("-TOTAL_FORMS")) continue;
    const total = form.elements[name];
    while (total && Number(total.value) < Number(value)) {
      if (!addRow(name.slice(0, -"-TOTAL_FORMS".length))) break;
    }
  }
  const values = new Map();
  for (const [name, value] of draft.entries) values.set(name, [...(values.get(name) ?? []), value]);
  for (const input of form.elements) {
    if (!input.name || LEAVE_OUT.has(input.type) || input === idInput) continue;
    if (input.name === "csrfmiddlewaretoken" || /-(TOTAL|INITIAL)_FORMS$/.test(input.name)) continue;
    const found = values.get(input.name);
    if (input.type === "checkbox" || input.type === "radio") {
      input.checked = Boolean(found?.includes(input.value));
    } else if (input.type === "select-multiple") {
      for (const option of input.options) option.selected = Boolean(found?.includes(option.value));
    } else if (found && input.type !== "hidden" && input.type !== "submit" && input.type !== "button") {
      input.value = found.shift();
    }
  }
  idInput.value = draft.id;
  form.dispatchEvent(new Event("input", { bubbles: true }));
}

function drafts() {
  const found = [];
  for (let index = 0; index < localStorage.length; index += 1) {
    const key = localStorage.key(index);
    if (!key.startsWith(PREFIX)) continue;
    const draft = attempt(() => JSON.parse(localStorage.getItem(key)));
    if (draft) found.push({ ...draft, key });
  }
  return found;
}

function offer(form, idInput, draft) {
  const bar = document.createElement("div");
  const words = document.createElement("p");
  const use = document.createElement("button");
  const drop = document.createElement("button");
  bar.className = "draft";
  bar.setAttribute("role", "status");
  const { date, time } = timeThere(new Date(draft.at));
  words.textContent = `Typed here on ${date} at ${time} and not recorded.`;
  use.type = drop.type = "button";
  use.textContent = "Continue with it";
  drop.textContent = "Discard it";
  use.addEventListener("click", () => {
    restore(form, idInput, draft);
    bar.remove();
  });
  drop.addEventListener("click", () => {
    localStorage.removeItem(draft.key);
    bar.remove();
  });
  bar.append(words, use, drop);
  form.prepend(bar);
}

function keepDraft(form) {
  const idInput = form.elements[form.dataset.draft || "client"];
  if (!idInput?.value) return;
  const idName = idInput.name;
  const who = document.body.dataset.who ?? "";
  const page = location.pathname;
  let timer;
  const save = () => {
    const draft = { id: idInput.value, who, page, at: Date.now(), entries: entries(form, idName) };
    attempt(() => localStorage.setItem(PREFIX + idInput.value, JSON.stringify(draft)));
  };
  form.addEventListener("input", () => {
    clearTimeout(timer);
    timer = setTimeout(save, WAIT);
  });
  form.addEventListener("submit", () => {
    clearTimeout(timer);
    save();
    attempt(() => sessionStorage.setItem(SENT, JSON.stringify({ id: idInput.value, page })));
  });
  const earlier = drafts()
    .filter((draft) => draft.page === page && draft.who === who && draft.id !== idInput.value)
    .sort((one, other) => other.at - one.at)[0];
  if (earlier) offer(form, idInput, earlier);
}

/* A form was recorded when its page led straight to another page; only then is its draft dropped. */
function settleSent(forms) {
  const sent = JSON.parse(sessionStorage.getItem(SENT) ?? "null");
  if (!sent) return;
  sessionStorage.removeItem(SENT);
  const stillHere = forms.some((form) => form.elements[form.dataset.draft || "client"]?.value === sent.id);
  const cameFrom = document.referrer ? new URL(document.referrer).pathname : "";
  if (!stillHere && cameFrom === sent.page) localStorage.removeItem(PREFIX + sent.id);
}

function start() {
  showHelps();
  document.querySelector("[data-focus]")?.focus();
  all("[data-show]").forEach(showAsked);
  const forms = all("form[data-draft]");
  attempt(() => settleSent(forms));
  attempt(() => {
    for (const draft of drafts()) if (Date.now() - draft.at > KEPT_FOR) localStorage.removeItem(draft.key);
    forms.forEach(keepDraft);
  });
}

start();
