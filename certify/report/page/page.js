// The page: runs the checker on the files inside the page, and filters what is shown.
"use strict";
(() => {
  const find = (id) => document.getElementById(id);
  const data = (id) => JSON.parse(find(id).textContent);
  const SHAPES = { waiting: "○", accepted: "✓", rejected: "✗", open: "◇" };
  // Milliseconds: of work between two pauses, and for a Worker to say that it is there.
  const PAUSE = 25;
  const PATIENCE = 4000;
  const rows = [...document.querySelectorAll("#instances tbody tr")];
  const reasons = new Map(
    [...document.querySelectorAll("details.reason")].map((item) => [item.dataset.row, item]),
  );

  function readFile(text) {
    const letters = atob(text);
    const bytes = new Uint8Array(letters.length);
    for (let i = 0; i < bytes.length; i += 1) bytes[i] = letters.charCodeAt(i);
    return bytes;
  }

  const readFiles = () =>
    new Map(Object.entries(data("files")).map(([name, text]) => [name, readFile(text)]));

  // ---- states, told by a shape and by words

  function show(cell, state, text) {
    cell.dataset.state = state;
    const shape = document.createElement("span");
    shape.setAttribute("aria-hidden", "true");
    shape.textContent = SHAPES[state];
    cell.replaceChildren(shape, ` ${text}`);
  }

  function showRow(place, state, text) {
    show(rows[place].querySelector(".state"), state, text);
    const reason = reasons.get(String(place));
    if (reason) show(reason.querySelector(".state"), state, state === "rejected" ? "rejected" : text);
  }

  function nameOf(instance) {
    if (typeof instance === "number") return String(instance);
    const words = [...instance.keys()].sort().map((name) => `${name}=${instance.get(name)}`);
    return words.join(",") || "only";
  }

  // What the page says of the instance has to be what its files say.
  function differs(row, item) {
    const { instance, answer, kind } = row.dataset;
    if (nameOf(item.instance) !== instance) return `the files have instance ${nameOf(item.instance)} here`;
    if (item.answer !== answer) return `the page says ${answer}, its files say ${item.answer}`;
    return item.kind === kind ? null : `the page says ${kind}, its files say ${item.kind}`;
  }

  // ---- one run of the checker

  class Run {
    constructor() {
      this.count = 0;
      this.wrong = 0;
      this.told = 0;
      this.bad = null;
      this.last = null;
    }

    take(item) {
      if (item.final) {
        this.last = item;
        return;
      }
      const place = this.count;
      this.count += 1;
      if (place >= rows.length) {
        this.wrong += 1;
        return;
      }
      const complaint = differs(rows[place], item);
      if (complaint !== null) this.wrong += 1;
      if (complaint !== null) showRow(place, "rejected", `rejected: ${complaint}`);
      else if (item.verdict === "accepted") showRow(place, "accepted", "accepted");
      else if (item.kind === "none" && item.answer === "open") showRow(place, "open", item.reason);
      else {
        this.bad ??= place;
        showRow(place, "rejected", `rejected: ${item.reason}`);
      }
      this.progress();
    }

    // Not more than once a second: it is read aloud.
    progress() {
      find("progress").value = this.count;
      if (performance.now() - this.told < 1000) return;
      this.told = performance.now();
      find("status").textContent = `${this.count} of ${rows.length} instances looked at …`;
    }

    // The whole is accepted when the checker says so and the page shows just what it looked at.
    end(crash) {
      const { last } = this;
      for (let place = this.count; place < rows.length; place += 1) {
        showRow(place, "rejected", "rejected: the checker did not come to it");
      }
      const cell = find("status");
      const sums = last && `${last.accepted} of ${last.instances} instances accepted`;
      const same = this.wrong === 0 && this.count === rows.length;
      if (crash || last === null) show(cell, "rejected", `Rejected: the checker ended with ${crash || "no verdict"}`);
      else if (last.verdict === "accepted" && same) {
        show(cell, "accepted", `Accepted, the whole claim: ${sums}, checked here just now.`);
      } else if (last.verdict === "accepted") {
        show(cell, "rejected", "Rejected: the page shows something else than its files.");
      } else if (last.onlyOpen && same) {
        show(cell, "open", `Left open, not rejected: ${sums}. ${last.reason}.`);
      } else {
        const look = this.bad === null ? "" : ` See ${rows[this.bad].firstElementChild.textContent}.`;
        show(cell, "rejected", `Rejected: ${last.reason}; ${sums}.${look}`);
      }
      find("progress").hidden = true;
      find("check").disabled = false;
      find("check").textContent = "Check again";
    }
  }

  const urlOf = (...texts) => URL.createObjectURL(new Blob(texts, { type: "text/javascript" }));

  // Resolves to whether the Worker could be started at all: not every browser makes one for a
  // page from a file, and some say nothing.
  function runInWorker(run) {
    return new Promise((resolve) => {
      let worker;
      try {
        worker = new Worker(urlOf(data("checker"), data("worker")));
      } catch {
        resolve(false);
        return;
      }
      let started = false;
      const timer = setTimeout(() => {
        worker.terminate();
        resolve(false);
      }, PATIENCE);
      worker.onerror = (event) => {
        event.preventDefault();
        clearTimeout(timer);
        worker.terminate();
        if (started) run.end(event.message || "an error");
        resolve(started);
      };
      worker.onmessage = ({ data: { ready, item, crash } }) => {
        clearTimeout(timer);
        started = true;
        if (ready) worker.postMessage(readFiles());
        else if (item) run.take(item);
        else {
          worker.terminate();
          run.end(crash);
          resolve(true);
        }
      };
    });
  }

  const pause = () => new Promise((resolve) => setTimeout(resolve));

  function loadChecker() {
    return new Promise((resolve, reject) => {
      const script = document.createElement("script");
      script.src = urlOf(data("checker"));
      script.onload = resolve;
      script.onerror = () => reject(new Error("the browser runs no script made by the page"));
      document.head.append(script);
    });
  }

  async function runHere(run) {
    try {
      if (typeof checkFolder === "undefined") await loadChecker();
      let since = performance.now();
      for await (const item of checkFolder(readerOf(readFiles()))) {
        run.take(item);
        if (performance.now() - since < PAUSE) continue;
        await pause();
        since = performance.now();
      }
      run.end();
    } catch (error) {
      run.end(String(error));
    }
  }

  async function check() {
    find("check").disabled = true;
    find("progress").hidden = false;
    find("progress").value = 0;
    delete find("status").dataset.state;
    find("status").textContent = "Checking …";
    rows.forEach((_, place) => showRow(place, "waiting", "not yet checked here"));
    await pause();
    const run = new Run();
    if (!(await runInWorker(run))) await runHere(run);
  }

  // ---- filters

  function filter() {
    const answer = find("by-answer").value;
    const kind = find("by-kind").value;
    const words = find("by-text").value.toLowerCase().replace(/\s+/g, " ").trim();
    let count = 0;
    rows.forEach((row, place) => {
      const fits =
        (answer === "" || row.dataset.answer === answer) &&
        (kind === "" || row.dataset.kind === kind) &&
        row.textContent.toLowerCase().replace(/\s+/g, " ").includes(words);
      row.hidden = !fits;
      const reason = reasons.get(String(place));
      if (reason) reason.hidden = !fits;
      count += fits;
    });
    find("shown").textContent = `${count} of ${rows.length} shown`;
  }

  // ---- links to reasons, and files to save

  function openTarget() {
    const target = find(decodeURIComponent(location.hash.slice(1)));
    if (!target || target.tagName !== "DETAILS") return;
    target.open = true;
    target.querySelector("summary").focus({ preventScroll: true });
    target.scrollIntoView();
  }

  function save(name) {
    const link = document.createElement("a");
    link.href = URL.createObjectURL(new Blob([readFiles().get(name)]));
    link.download = name.split("/").pop();
    link.click();
  }

  find("check").addEventListener("click", check);
  for (const name of ["by-answer", "by-kind", "by-text"]) find(name).addEventListener("input", filter);
  find("filters").addEventListener("submit", (event) => event.preventDefault());
  find("open-all").addEventListener("click", () => {
    const open = [...reasons.values()].some((reason) => !reason.hidden && !reason.open);
    for (const reason of reasons.values()) reason.open = open && !reason.hidden;
  });
  document.querySelectorAll("[data-save]").forEach((button) => {
    button.addEventListener("click", () => save(button.dataset.save));
  });
  window.addEventListener("hashchange", openTarget);
  for (const item of document.querySelectorAll("[data-scripted]")) item.hidden = false;
  find("progress").max = rows.length;
  filter();
  openTarget();
})();
