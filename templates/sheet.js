/* A sheet in use: sections fold, numbers are copied with their unit and uncertainty, every number has a link of its own,
   symbols say what they stand for, figures can be enlarged. Without it the sheet is whole and open. */
"use strict";
(() => {
  const bar = document.getElementById("sheet-tools");
  if (!bar || typeof SHEET === "undefined") return;
  const data = SHEET;
  const said = document.getElementById("sheet-said");

  /** An element with properties and children. */
  function make(tag, properties = {}, ...children) {
    const element = Object.assign(document.createElement(tag), properties);
    element.append(...children);
    return element;
  }

  let clearing = 0;
  function say(text) {
    said.textContent = text;
    clearTimeout(clearing);
    clearing = setTimeout(() => { said.textContent = ""; }, 8000);
  }

  /** Put a text on the clipboard; a page opened from a disk may lack the newer way. */
  async function copy(text) {
    try {
      await navigator.clipboard.writeText(text);
      return true;
    } catch {
      const area = make("textarea", { value: text, className: "aside" });
      const before = document.activeElement;
      document.body.append(area);
      area.select();
      const done = document.execCommand("copy");
      area.remove();
      before?.focus({ preventScroll: true });
      return done;
    }
  }

  // --- numbers

  const MINUS = "\u2212";
  const superscript = (power) => String(power).replace(/[-\d]/g, (sign) => "⁰¹²³⁴⁵⁶⁷⁸⁹⁻"["0123456789-".indexOf(sign)]);

  const FORMS = {
    plain: ([digits, power], [, unit]) => {
      const number = digits.replace("-", MINUS) + (power ? ` × 10${superscript(power)}` : "");
      return unit ? `${number} ${unit.replace(/\u202f/g, " ")}` : number;
    },
    latex: ([digits, power], [, , unit]) => {
      const number = digits + (power ? `e${power}` : "");
      return unit ? `\\qty{${number}}{${unit}}` : `\\num{${number}}`;
    },
    json: ([digits, power], [unit], id) => {
      const [quantity, at] = id.split("@");
      const [, value, places = "", spread] = /^(-?\d+(?:\.(\d+))?)(?:\((\d+)\))?$/.exec(digits);
      const found = { material: data.slug, edition: data.edition, quantity, ...(at ? { at } : {}), value: Number(`${value}e${power}`), unit };
      return JSON.stringify(spread ? { ...found, standard_uncertainty: Number(`${spread}e${power - places.length}`) } : found);
    },
    link: (_number, _unit, id) => `${location.href.split("#")[0]}#${id}`,
  };

  const form = () => bar.querySelector("input[name=copy-form]:checked").value;
  const written = (id, as) => FORMS[as](data.numbers[id], data.units[data.numbers[id][2]], id);

  async function take(id, title) {
    const text = written(id, form());
    say((await copy(text)) ? `Copied: ${text}` : `The browser does not let this page copy. ${title}: ${text}`);
  }

  /** Make a printed number a button that copies it, with a link to its place behind it. */
  function quotable(cell, id, title) {
    const button = make("button", { type: "button", className: "copy" });
    button.append(...[...cell.childNodes].filter((node) => !node.matches?.(".only-mark, .interval")));
    const label = make("span", { className: "aside", textContent: `Copy ${title}: ` });
    button.prepend(label);
    button.addEventListener("click", () => take(id, title));
    cell.prepend(button);
    if (cell.tagName === "DD") return;
    const link = make("a", { href: `#${id}`, className: "place", textContent: "#" });
    link.setAttribute("aria-label", `Link to ${title}`);
    cell.append(link);
  }

  function titleOf(place) {
    const row = place.closest("tr");
    const name = row.querySelector("th").textContent.trim();
    if (place.tagName !== "TD") return name;
    const head = place.closest("table").tHead.rows[0].cells[place.cellIndex];
    return `${name} at ${head.textContent.trim().replace(/\u202f/g, " ")}`;
  }

  for (const id of Object.keys(data.numbers)) {
    const place = document.getElementById(id);
    const cell = place?.tagName === "TD" ? place : place?.querySelector("td.number");
    if (cell?.textContent.trim()) quotable(cell, id, titleOf(place));
  }
  document.querySelectorAll("dd[data-of]").forEach((cell) => {
    const id = Object.keys(data.numbers).find((key) => key === cell.dataset.of || key.startsWith(`${cell.dataset.of}@`));
    if (id) quotable(cell, id, cell.previousElementSibling.querySelector("span").textContent);
  });
  document.querySelectorAll("button[data-copy]").forEach((button) => {
    button.hidden = false;
    button.addEventListener("click", async () => {
      const text = document.getElementById(button.dataset.copy).textContent.trim();
      say((await copy(text)) ? "Copied the citation." : "The browser does not let this page copy; select the text instead.");
    });
  });

  // --- sections that fold; in print all stand open (style sheet)

  const parts = [...document.querySelectorAll(".part")].filter((part) => part.querySelector(":scope > h2[id]"));
  const isOpen = (part) => !part.querySelector(":scope > .body").hasAttribute("hidden");

  function fold(part, open) {
    const body = part.querySelector(":scope > .body");
    if (open) body.removeAttribute("hidden");
    else body.setAttribute("hidden", "until-found"); // so that a search in the page still finds what is folded away
    part.classList.toggle("folded", !open);
    part.querySelector(":scope > h2 button").setAttribute("aria-expanded", String(open));
  }

  for (const part of parts) {
    const [head, body] = [part.querySelector("h2"), part.querySelector(".body")];
    const button = make("button", { type: "button", className: "fold" });
    button.append(...head.childNodes);
    button.setAttribute("aria-expanded", "true");
    body.id ||= `${head.id}-body`;
    button.setAttribute("aria-controls", body.id);
    head.append(button);
    button.addEventListener("click", () => fold(part, !isOpen(part)));
    body.addEventListener("beforematch", () => fold(part, true));
  }

  const all = document.getElementById("fold-all");
  all.addEventListener("click", () => {
    const open = !parts.some(isOpen);
    parts.forEach((part) => fold(part, open));
    all.textContent = open ? "Fold all" : "Open all";
  });

  function reveal() {
    const target = document.getElementById(decodeURIComponent(location.hash.slice(1)));
    const part = target?.closest(".part");
    if (!part || !parts.includes(part) || isOpen(part)) return;
    fold(part, true);
    target.scrollIntoView();
  }
  addEventListener("hashchange", reveal);
  reveal();

  // --- symbols

  const tip = make("div", { id: "symbol-tip", role: "tooltip", hidden: true });
  document.body.append(tip);
  let shownFor = null;

  function hideTip() {
    tip.hidden = true;
    shownFor?.removeAttribute("aria-describedby");
    shownFor = null;
  }

  function showTip(symbol, words) {
    if (shownFor !== symbol) hideTip();
    shownFor = symbol;
    tip.textContent = words;
    tip.hidden = false;
    symbol.setAttribute("aria-describedby", tip.id);
    const [at, size] = [symbol.getBoundingClientRect(), tip.getBoundingClientRect()];
    const left = Math.max(8, Math.min(at.left, document.documentElement.clientWidth - size.width - 8));
    const below = at.bottom + size.height + 8 < innerHeight;
    tip.style.left = `${left + scrollX}px`;
    tip.style.top = `${(below ? at.bottom + 2 : at.top - size.height - 2) + scrollY}px`;
  }

  /** What a quantity is, with its value on this sheet. */
  function meaning(id) {
    const row = document.getElementById(id);
    if (!row) return "";
    const name = row.querySelector("th a").textContent.trim();
    const key = data.numbers[id] ? id : Object.keys(data.numbers).find((one) => one.startsWith(`${id}@`));
    if (!key) return name;
    const value = FORMS.plain(data.numbers[key], data.units[data.numbers[key][2]]);
    return `${name}: ${value}${key === id ? "" : ` at ${key.split("@")[1].replace(/[A-Za-z]/, " $&")}`}`;
  }

  function explained(symbol, words) {
    if (!words) return;
    symbol.classList.add("explained");
    for (const event of ["pointerenter", "click", "focus"]) symbol.addEventListener(event, () => showTip(symbol, words));
    symbol.addEventListener("blur", hideTip);
    symbol.addEventListener("pointerleave", (event) => { if (event.relatedTarget !== tip) hideTip(); });
  }

  // Beside its name a symbol needs no stop of the keyboard; alone in a sentence it becomes a button.
  document.querySelectorAll("tr[id] > td.symbol > math").forEach((symbol) => explained(symbol, meaning(symbol.closest("tr").id)));
  document.querySelectorAll("dl.key dt > math").forEach((symbol) => explained(symbol, meaning(symbol.closest("div").querySelector("dd").dataset.of)));
  document.querySelectorAll(".body i + sub").forEach((sub) => {
    const letter = sub.previousElementSibling;
    const id = data.symbols[`${letter.textContent}_${sub.textContent}`];
    if (!id || letter.nextSibling !== sub || letter.closest("a, button") || !document.getElementById(id)) return;
    const button = make("button", { type: "button", className: "sign" });
    letter.before(button);
    button.append(letter, sub);
    explained(button, meaning(id));
  });
  tip.addEventListener("pointerleave", hideTip);
  addEventListener("keydown", (event) => { if (event.key === "Escape") hideTip(); });

  bar.hidden = false;
  document.documentElement.classList.add("with-tools");
})();
