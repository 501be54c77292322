/* Search of the handbook in the page: names, symbols however they are written, and a number by material and quantity. */
"use strict";
(() => {
  const { element: make } = handbook;
  const quantities = handbookTables.quantities;
  const page = document.getElementById("search");
  const input = page.querySelector("input");
  const [said, list] = ["search-said", "search-found"].map((id) => document.getElementById(id));
  const MOST = 40, NUMBERS = 6;
  const WEIGHT = { material: 1.3, quantity: 1.25, page: 1.1, assumption: 0.9, source: 0.8 };
  const SMALL = new Set(["of", "the", "a", "an", "in", "for", "and", "at", "is", "what"]);
  const GREEK = { α: "alpha", β: "beta", γ: "gamma", δ: "delta", ε: "epsilon", ϵ: "epsilon", ζ: "zeta", η: "eta", θ: "theta", ϑ: "theta", κ: "kappa", λ: "lambda",
    μ: "mu", ν: "nu", ξ: "xi", π: "pi", ρ: "rho", σ: "sigma", τ: "tau", φ: "phi", ϕ: "phi", χ: "chi", ψ: "psi", ω: "omega", ħ: "hbar", ℏ: "hbar" };

  /* Small letters without accents, Greek by name, indices on the line: "E_F", "EF" and "E subscript F" alike. */
  const even = (text) => text.replace(/[ħℏ]/g, " hbar ").normalize("NFKD").replace(/\p{M}/gu, "").toLowerCase()
    .replace(/\p{Script=Greek}/gu, (letter) => ` ${GREEK[letter] || letter} `).replace(/[–—−]/g, "-");
  const pieces = (text) => even(text).split(/[^\p{L}\p{N}.%]+/u).filter(Boolean);
  const joined = (text) => pieces(text).join("");

  const entries = handbookTables.search.map(([kind, title, symbol, address, more]) => {
    const own = pieces(title), further = pieces(`${symbol} ${more}`);
    return { kind, title, symbol, address, own, further, sign: joined(symbol), slug: address.replace(/^\w+\/|\.html.*$/g, "") };
  });
  const materials = entries.filter(({ kind }) => kind === "material");
  const numbers = entries.filter(({ kind, slug }) => kind === "quantity" && quantities[slug]);

  /* How well one word fits: a whole symbol best, then whole words, beginnings, parts. */
  function fit(entry, word) {
    if (entry.sign && entry.sign === word) return 8;
    let best = 0;
    for (const [tokens, weight] of [[entry.own, 2], [entry.further, 1]]) {
      for (const token of tokens) {
        if (token === word) best = Math.max(best, 3 * weight);
        else if (token.startsWith(word)) best = Math.max(best, 2 * weight);
        else if (word.length > 2 && token.includes(word)) best = Math.max(best, weight);
      }
    }
    if (!best && word.length > 1 && entry.sign.includes(word)) best = 1.5;
    return best;
  }

  /* The mean over all words, 0 where one of them fits nowhere; a whole symbol and a title without further words come first. */
  function score(entry, words) {
    const fits = words.map((word) => fit(entry, word));
    if (!words.length || fits.some((one) => !one)) return 0;
    const whole = entry.sign && entry.sign === words.join("") ? 8 : 0;
    return whole + (fits.reduce((sum, one) => sum + one, 0) / words.length) * WEIGHT[entry.kind] + 1 / (1 + entry.own.length);
  }

  const ranked = (some, words, least = 0) => some.map((entry) => ({ entry, points: score(entry, words) })).filter(({ points }) => points > least)
    .sort((a, b) => b.points - a.points || handbook.compare(a.entry.title, b.entry.title));

  /* Numbers: some words name a material, the others a quantity. */
  function combined(words) {
    const found = [];
    for (const material of materials) {
      const names = words.filter((word) => material.sign === word || material.own.some((token) => token === word || (word.length > 2 && token.startsWith(word))));
      const rest = words.filter((word) => !names.includes(word));
      if (names.length && rest.length) for (const { entry, points } of ranked(numbers, rest)) found.push({ material, entry, points: points + score(material, names) });
    }
    return found.sort((a, b) => b.points - a.points).slice(0, NUMBERS);
  }

  function line({ kind, title, symbol, address }) {
    const sign = !symbol ? null : kind === "material" ? handbook.chemical(symbol) : handbook.symbol(symbol);
    return make("li", {}, make("span", { class: "kind", text: kind }), make("span", { class: "find-text" }, make("a", { href: address, text: title }), " ", sign && make("span", { class: "set" }, sign)));
  }

  function numberLine({ material, entry }) {
    const value = make("span", { class: "find-value" });
    const made = make("li", {}, make("span", { class: "kind", text: "number" }), make("span", { class: "find-text" },
      make("a", { href: `${material.address}#${entry.slug}`, text: `${entry.title} of ${material.title}` }), " ", value));
    fill(value, material, entry.slug, made);
    return made;
  }

  async function fill(value, material, id, line) {
    try {
      const [list, column] = await Promise.all([handbook.table("materials"), handbook.table(`columns/${id}`)]);
      const [point] = quantities[id].points[0], row = list.slug.indexOf(material.slug), { value: values, spread = [], standing, whole } = column[point];
      if (values[row] === null) return line.remove();
      const [, unit, factor] = quantities[id].units[0];
      const number = handbook.words(handbook.printed(values[row] * factor, (spread[row] || 0) * factor, whole));
      const words = quantities[id].points[0][1];
      value.append(handbook.typeset(`${number}${unit && handbook.NARROW}${unit}`), words ? ` at ${words}` : "", " ", handbook.standing(Number(standing[row])));
    } catch {
      value.textContent = ""; // the link still leads to the number
    }
    return undefined;
  }

  function show(remember = true) {
    const text = input.value;
    if (remember) handbook.remember(new URLSearchParams(text.trim() ? { for: text } : {}));
    // "E_F" is one word, "fermi-velocity" two.
    const words = text.trim().split(/[\s,;]+/).flatMap((word) => (/[_{}^]/.test(word) ? [joined(word)] : /\p{Script=Greek}|ħ/u.test(word) ? [joined(word)] : pieces(word))).filter((word) => word && !SMALL.has(word));
    const both = combined(words);
    const plain = ranked(entries, words).slice(0, MOST);
    list.replaceChildren(...both.map(numberLine), ...plain.map(({ entry }) => line(entry)));
    const count = both.length + plain.length;
    said.textContent = !words.length ? "" : count ? `${count}${plain.length === MOST ? " or more" : ""} found` : "Nothing found. Fewer words or another spelling may help.";
    for (const other of document.querySelectorAll("main > section.part:not(#search)")) other.hidden = Boolean(words.length);
  }

  const links = () => [input, ...list.querySelectorAll("a")];
  page.addEventListener("keydown", (event) => {
    if (event.key === "Enter" && event.target === input && links()[1]) links()[1].click();
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
    if (!step) return;
    event.preventDefault();
    links()[links().indexOf(document.activeElement) + step]?.focus();
  });

  function fromAddress() {
    input.value = handbook.state().get("for") || "";
    show(false);
  }

  input.addEventListener("input", () => show());
  addEventListener("hashchange", fromAddress);
  page.hidden = false;
  fromAddress();
  // Who comes by the link of the masthead wants to type; the browser's own jump to the place would take the focus away.
  if (location.hash === "#words") for (const moment of ["DOMContentLoaded", "load"]) addEventListener(moment, () => input.focus());
})();
