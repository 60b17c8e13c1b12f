// What the browser alone can know: the room's light, a press of Escape, and a silent program.
(function () {
  "use strict";
  const dark = window.matchMedia("(prefers-color-scheme: dark)");
  const small = window.matchMedia("(max-width: 760px)");
  const scheme = () => (dark.matches ? "dark" : "light");
  let opener = null;

  window.dash_clientside = Object.assign({}, window.dash_clientside, {
    screens: {
      room: () => [scheme(), small.matches],
      // Focus goes to the sheet when it opens and back to what opened it when it closes.
      meet_sheet: function (hidden) {
        window.setTimeout(function () {
          const title = document.getElementById("why-title");
          if (!hidden && title) { title.focus(); }
          if (hidden && opener && document.contains(opener)) { opener.focus(); opener = null; }
        }, 30);
        return window.dash_clientside.no_update;
      },
    },
  });

  dark.addEventListener("change", function () {
    window.dash_clientside.set_props("scheme", { data: scheme() });
  });
  small.addEventListener("change", function () {
    window.dash_clientside.set_props("narrow", { data: small.matches });
  });

  document.addEventListener("click", function (event) {
    const button = event.target.closest("button");
    if (!button) { return; }
    if (button.classList.contains("why")) { opener = button; }
    if (button.classList.contains("print")) { window.print(); }
  });

  document.addEventListener("keydown", function (event) {
    const sheet = document.querySelector(".why-sheet:not([hidden])");
    if (event.key === "Escape" && sheet) { sheet.querySelector("button.close").click(); }
  });

  // Paper is narrower than the window: the figures are drawn anew for it, and back again.
  const paper = window.matchMedia("print");
  paper.addEventListener("change", function () {
    document.querySelectorAll(".js-plotly-plot").forEach(function (figure) {
      if (!window.Plotly || !figure.offsetParent) { return; }
      const room = figure.parentElement.getBoundingClientRect();
      window.Plotly.relayout(figure, paper.matches
        ? { autosize: false, width: room.width, height: room.height }
        : { autosize: true, width: null, height: null });
    });
  });

  // Each answer changes a counter; where it stands still, the program has gone silent.
  let counted = null;
  let since = Date.now();
  window.setInterval(function () {
    const heard = document.getElementById("heard");
    const lost = document.getElementById("lost");
    if (!heard || !lost) { return; }
    if (heard.textContent !== counted) { counted = heard.textContent; since = Date.now(); }
    const patience_ms = 4000 * Number(lost.dataset.everyS);
    document.body.classList.toggle("lost", Date.now() - since > patience_ms);
  }, 1000);
})();
