/* What the scripts of the pages share: tables that the press computed, and numbers and units printed as the pages print them. */
"use strict";
globalThis.handbook = (() => {
  const root = document.currentScript.dataset.root || "";
  const NARROW = "\u202f", FIGURE = "\u2007", MINUS = "\u2212", TIMES = "\u00d7";
  const STANDINGS = ["agrees", "adjust", "undecided", "fails", "outside", "unchecked"];
  const waiting = new Map();

  /* A table by name, loaded once. A page on a disk may not fetch a file, but it may run one. */
  function table(name) {
    const loaded = globalThis.handbookTables?.[name];
    if (loaded) return Promise.resolve(loaded);
    if (!waiting.has(name)) waiting.set(name, new Promise((resolve, reject) => {
      const script = document.createElement("script");
      script.src = `${root}tables/${name.split("/").map(encodeURIComponent).join("/")}.js`;
      script.onload = () => resolve(globalThis.handbookTables[name]);
      script.onerror = () => reject(new Error(`The table ${name} cannot be loaded.`));
      document.head.append(script);
    }));
    return waiting.get(name);
  }

  /* --- numbers, by the same rules as in the pages: two digits of the uncertainty, six digits where there is none */

  const adjusted = (value) => Number(value.toExponential().split("e")[1]);
  const isPlain = (magnitude) => magnitude >= -3 && magnitude <= 4;
  const signed = (power) => String(power).replace("-", MINUS);

  function grouped(text) {
    const [before, after] = text.replace("-", "").split(".");
    const parted = before.length > 4 ? before.replace(/\B(?=(\d{3})+$)/g, NARROW) : before;
    return (text.startsWith("-") ? MINUS : "") + parted + (after ? `.${after}` : "");
  }

  function printed(value, spread, whole) {
    if (whole && Number.isInteger(value) && Math.abs(value) < 1e15) return { digits: grouped(String(value)), spread: "", exponent: 0 };
    if (spread) {
      const two = spread.toExponential(1);
      const place = Number(two.split("e")[1]) - 1;
      const top = value ? Math.max(adjusted(value), place + 1) : place + 1;
      if (top - place < 15) {
        const exponent = place <= 0 && isPlain(top) ? 0 : top;
        const digits = (value / 10 ** exponent).toFixed(Math.max(0, exponent - place));
        return { digits: grouped(digits), spread: two[0] + two[2], exponent };
      }
    }
    if (!value) return { digits: "0", spread: "", exponent: 0 };
    const rounded = Number(value.toPrecision(6));
    const exponent = isPlain(adjusted(rounded)) ? 0 : adjusted(rounded);
    const digits = Number((rounded / 10 ** exponent).toPrecision(6)).toString();
    return { digits: grouped(digits), spread: "", exponent };
  }

  const words = (number) => number.digits + (number.spread && `(${number.spread})`)
    + (number.exponent ? `${NARROW}${TIMES}${NARROW}10${raised(number.exponent)}` : "");
  const raised = (power) => String(power).replace(/[-\d]/g, (sign) => "⁰¹²³⁴⁵⁶⁷⁸⁹"[sign] ?? "⁻");

  /* The power of ten that a column takes into its head: a multiple of three, 0 where none is needed. */
  function columnPower(values) {
    const sizes = values.filter(Boolean).map((value) => Math.floor(Math.log10(Math.abs(value)))).sort((a, b) => a - b);
    if (!sizes.length) return 0;
    const median = sizes[Math.floor((sizes.length - 1) / 2)];
    return isPlain(median) ? 0 : 3 * Math.floor(median / 3);
  }

  /* Numbers printed under each other with their points in line; "" for null. */
  function column(values, spreads, power, whole) {
    const scale = 10 ** -power;
    const cells = values.map((value, row) => (value === null ? null : printed(value * scale, (spreads[row] || 0) * scale, whole)));
    const before = (cell) => cell.digits.split(".")[0].length;
    const widest = Math.max(0, ...cells.filter(Boolean).map(before));
    return cells.map((cell) => (cell ? FIGURE.repeat(widest - before(cell)) + words(cell) : ""));
  }

  /* --- words */

  const plain = (text) => text.normalize("NFKD").replace(/\p{M}/gu, "").toLowerCase();
  const compare = new Intl.Collator(document.documentElement.lang || "en", { numeric: true }).compare;

  function element(name, settings = {}, ...children) {
    const made = document.createElement(name);
    for (const [key, value] of Object.entries(settings)) {
      if (value === undefined || value === false) continue;
      if (key === "text") made.textContent = value;
      else if (key === "class") made.className = value;
      else if (key.startsWith("on")) made.addEventListener(key.slice(2), value);
      else made.setAttribute(key, value === true ? "" : value);
    }
    made.append(...children.filter((child) => child !== null && child !== undefined));
    return made;
  }

  /* Text with superscript figures set as real superscripts. */
  function typeset(text) {
    const pieces = document.createDocumentFragment();
    for (const piece of text.split(/([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+)/)) {
      const power = piece.replace(/./gu, (sign) => (sign === "⁻" ? MINUS : "⁰¹²³⁴⁵⁶⁷⁸⁹".indexOf(sign)));
      if (/^[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]/.test(piece)) pieces.append(element("sup", { text: power }));
      else if (piece) pieces.append(piece);
    }
    return pieces;
  }

  /* A chemical formula with its numbers as subscripts. */
  function chemical(formula) {
    const pieces = document.createDocumentFragment();
    for (const piece of formula.split(/(?<=[A-Za-z)\]])(\d+(?:\.\d+)?)/)) {
      if (/^\d/.test(piece)) pieces.append(element("sub", { text: piece }));
      else if (piece) pieces.append(piece);
    }
    return pieces;
  }

  /* A symbol such as *E*_{F}: the letter slanted, its index below the line. */
  function symbol(text) {
    const pieces = document.createDocumentFragment();
    for (const [piece, letters, below, above] of text.matchAll(/\*([^*]+)\*|_\{([^}]*)\}|\^\{([^}]*)\}|[^*_^]+/gu)) {
      const [name, words] = letters ? ["i", letters] : below ? ["sub", below] : above ? ["sup", above] : ["span", piece];
      pieces.append(element(name, { text: words }));
    }
    return pieces;
  }

  /* The mark of a standing with its word, or the mark alone with the word for those who do not see it. */
  function standing(place, only) {
    const word = STANDINGS[place];
    if (only) return element("span", { class: `standing only-mark ${word}`, role: "img", "aria-label": word });
    return element("span", { class: `standing ${word}`, text: word });
  }

  /* The state of a view, in the address: readable, and in the order in which it was set. */
  const state = () => new URLSearchParams(location.hash.slice(1));
  function remember(parameters) {
    const text = parameters.toString().replaceAll("%2C", ",").replaceAll("%3A", ":").replaceAll("%40", "@").replaceAll("%2F", "/");
    history.replaceState(null, "", text ? `#${text}` : location.pathname + location.search);
  }

  /* Hands the reader a file that the page made. */
  function download(name, kind, text) {
    const address = URL.createObjectURL(new Blob([text], { type: kind }));
    const link = element("a", { href: address, download: name });
    link.click();
    setTimeout(() => URL.revokeObjectURL(address), 10000);
  }

  const csvCell = (value) => (/[",\n]/.test(String(value)) ? `"${String(value).replaceAll('"', '""')}"` : String(value));

  return { root, STANDINGS, NARROW, table, printed, words, columnPower, column, raised, signed, plain, compare, element, typeset,
    chemical, symbol, standing, state, remember, download, csvCell };
})();
