// Follows the galley: reloads the page when something on it changed, and shows what is at fault.
"use strict";
(() => {
  const script = document.currentScript;
  const board = document.getElementById("galley-faults");
  let since = script.dataset.since;
  let source = null;

  const pathOf = (address) => {
    const path = decodeURI(new URL(address, location.href).pathname).slice(1);
    return path === "" || path.endsWith("/") ? path + "index.html" : path;
  };

  const shown = () => {
    const parts = document.querySelectorAll("img[src], link[rel=stylesheet][href], script[src]");
    return new Set([pathOf(location.href), ...Array.from(parts, (part) => pathOf(part.src || part.href))]);
  };

  const showFaults = (faults) => {
    const items = faults.map((fault) => {
      const item = document.createElement("li");
      const place = document.createElement("code");
      place.textContent = fault.place;
      item.append(place, " " + fault.message);
      return item;
    });
    board.querySelector("ul").replaceChildren(...items);
    board.hidden = faults.length === 0;
  };

  const hear = (event) => {
    const news = JSON.parse(event.data);
    since = event.lastEventId;
    const mine = shown();
    if (news.changed === null || news.changed.some((path) => mine.has(path))) {
      close();
      location.reload();
      return;
    }
    showFaults(news.faults);
  };

  const open = () => {
    if (source === null) {
      source = new EventSource("/-/events?since=" + encodeURIComponent(since));
      source.addEventListener("news", hear);
    }
  };

  const close = () => {
    if (source !== null) {
      source.close();
      source = null;
    }
  };

  // A page that nobody looks at holds no connection; it catches up when it is looked at again.
  document.addEventListener("visibilitychange", () => (document.hidden ? close() : open()));
  addEventListener("pagehide", close);
  addEventListener("pageshow", () => document.hidden || open());
  if (!document.hidden) {
    open();
  }
})();
