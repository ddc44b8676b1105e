"use strict";
(() => {
  const tools = document.getElementById("tools");
  if (!tools) return;
  tools.hidden = false;
  const fields = ["outcome", "gravity", "rule", "words"].map((name) => document.getElementById("by-" + name));
  const members = [...document.querySelectorAll("section.member")];
  const rows = new Map([...document.querySelectorAll("#index tbody tr")].map((row) => [row.dataset.member, row]));
  const told = document.getElementById("told");
  const show = () => {
    const [outcome, gravity, rule, words] = fields.map((field) => field.value.toLowerCase());
    let findings = 0, shown = 0;
    for (const member of members) {
      let some = 0;
      for (const finding of member.querySelectorAll(".finding")) {
        const fits = (!gravity || finding.dataset.gravity === gravity) && (!rule || finding.dataset.rule === rule) &&
          (!words || (member.dataset.name + " " + finding.textContent).toLowerCase().includes(words));
        finding.dataset.fits = fits ? "1" : "";
      }
      for (const finding of member.querySelectorAll(".finding")) {
        const fits = finding.dataset.fits || finding.querySelector('.finding[data-fits="1"]');
        finding.hidden = !fits;
        if (finding.dataset.fits) some += 1;
      }
      const plain = !gravity && !rule && (!words || member.dataset.name.toLowerCase().includes(words));
      const fits = (!outcome || member.dataset.outcome === outcome) && (some > 0 || plain);
      member.hidden = !fits;
      rows.get(member.id).hidden = !fits;
      if (fits) { shown += 1; findings += some; }
    }
    told.textContent = shown + " of " + members.length + " members, " + findings + " findings shown";
  };
  for (const field of fields) field.addEventListener("input", show);
  document.getElementById("all-open").addEventListener("click", () => fold(true));
  document.getElementById("all-shut").addEventListener("click", () => fold(false));
  const fold = (open) => document.querySelectorAll("details").forEach((one) => { one.open = open; });
  document.querySelectorAll("#index th").forEach((head, column) => {
    const button = document.createElement("button");
    button.type = "button";
    button.append(...head.childNodes);
    head.append(button);
    button.addEventListener("click", () => {
      const down = head.getAttribute("aria-sort") === "ascending";
      document.querySelectorAll("#index th").forEach((other) => other.removeAttribute("aria-sort"));
      head.setAttribute("aria-sort", down ? "descending" : "ascending");
      const body = document.querySelector("#index tbody");
      const key = (row) => row.cells[column].textContent.trim();
      const sorted = [...body.rows].sort((a, b) => key(a).localeCompare(key(b), "en", { numeric: true }));
      if (down) sorted.reverse();
      body.append(...sorted);
    });
  });
  const reveal = () => {
    const target = location.hash && document.getElementById(location.hash.slice(1));
    for (let one = target; one; one = one.parentElement) if (one.tagName === "DETAILS") one.open = true;
    if (target) target.scrollIntoView();
  };
  addEventListener("hashchange", reveal);
  addEventListener("beforeprint", () => fold(true));
  reveal();
  show();
})();
