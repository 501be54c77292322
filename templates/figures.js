/* Figures: enlarge one in a dialog, go on to the next by keyboard, save it as a picture of points (PNG) made in the page. */
"use strict";
(() => {
  const figures = [...document.querySelectorAll("figure[id^=figure-]")];
  const dialog = document.getElementById("enlarged");
  if (!figures.length || !dialog) return;
  const image = dialog.querySelector("img");
  const title = dialog.querySelector("h2");
  const text = dialog.querySelector(".caption");
  const files = dialog.querySelector(".files");
  const said = dialog.querySelector("[role=status]");
  const PIXELS = 2400; // width of a PNG
  let shown = 0;

  function show(index) {
    shown = (index + figures.length) % figures.length;
    const figure = figures[shown];
    const small = figure.querySelector("img");
    image.src = small.src;
    image.alt = small.alt;
    image.width = small.width;
    image.height = small.height;
    title.textContent = figure.querySelector("b").textContent;
    text.textContent = figure.querySelector(".long").textContent;
    const links = [...figure.querySelectorAll(".files a")].map((link) => link.cloneNode(true));
    files.replaceChildren(...links.flatMap((link) => [link, " "]), png);
    said.textContent = "";
  }

  /** Draw the picture on a canvas and hand it over as a file. */
  function save() {
    const canvas = document.createElement("canvas");
    canvas.width = PIXELS;
    canvas.height = Math.round((PIXELS * image.height) / image.width);
    const pen = canvas.getContext("2d");
    pen.fillStyle = "#fff";
    pen.fillRect(0, 0, canvas.width, canvas.height);
    pen.drawImage(image, 0, 0, canvas.width, canvas.height);
    try {
      canvas.toBlob((blob) => {
        const link = document.createElement("a");
        link.href = URL.createObjectURL(blob);
        link.download = image.src.split("/").slice(-2).join("-").replace(/\.svg$/, ".png");
        link.click();
        URL.revokeObjectURL(link.href);
        said.textContent = `Saved ${link.download}, ${canvas.width} by ${canvas.height} points.`;
      });
    } catch {
      // Browsers let no page that was opened from a disk read a picture back.
      said.textContent = "A page opened from a disk cannot make a PNG; open the handbook from a server, or save the SVG.";
    }
  }

  const png = Object.assign(document.createElement("button"), { type: "button", textContent: "Save as PNG" });
  png.addEventListener("click", save);

  figures.forEach((figure, index) => {
    const button = Object.assign(document.createElement("button"), { type: "button", className: "enlarge", textContent: "Enlarge" });
    button.append(Object.assign(document.createElement("span"), { className: "aside", textContent: ` ${figure.querySelector("b").textContent}` }));
    figure.querySelector(".files").prepend(button, " ");
    button.addEventListener("click", () => {
      show(index);
      dialog.showModal();
    });
  });

  dialog.querySelector("[data-step='-1']").addEventListener("click", () => show(shown - 1));
  dialog.querySelector("[data-step='1']").addEventListener("click", () => show(shown + 1));
  dialog.querySelector("[data-close]").addEventListener("click", () => dialog.close());
  dialog.addEventListener("keydown", (event) => {
    const forward = getComputedStyle(dialog).direction === "rtl" ? "ArrowLeft" : "ArrowRight";
    if (event.key === "ArrowRight" || event.key === "ArrowLeft") show(shown + (event.key === forward ? 1 : -1));
  });
  dialog.addEventListener("click", (event) => { if (event.target === dialog) dialog.close(); });
})();
