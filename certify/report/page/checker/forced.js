// The forced moves of a state (FORMAT.md, section 6, cases): what holds for every H that uses
// the used edges and none of the removed ones.

const FREE = 0;
const USED = 1;
const REMOVED = 2;

class State {
  // `status[e]` is FREE, USED or REMOVED.
  constructor(graph, status) {
    this.graph = graph;
    this.status = status;
  }

  static first(question) {
    return new State(question.graph, Uint8Array.from(question.required, (bit) => (bit ? USED : FREE)));
  }

  copy() {
    return new State(this.graph, this.status.slice());
  }

  at(v, status) {
    return this.graph.edgesAt[v].filter((e) => this.status[e] === status);
  }

  // The edges left at v, sorted by the neighbours they lead to.
  leftAt(v) {
    const left = this.graph.edgesAt[v].filter((e) => this.status[e] !== REMOVED);
    return left.sort((e, f) => this.graph.otherEnd(e, v) - this.graph.otherEnd(f, v));
  }

  set(edges, status) {
    for (const e of edges) this.status[e] = status;
  }

  // Rules 1 to 3 at every vertex, as long as they change anything; false at a contradiction.
  settleVertices() {
    const waiting = new Set(this.graph.edgesAt.keys());
    const change = (e, status) => {
      this.status[e] = status;
      waiting.add(this.graph.low[e]).add(this.graph.high[e]);
    };
    for (const v of waiting) {
      waiting.delete(v);
      const used = this.at(v, USED);
      const free = this.at(v, FREE);
      if (used.length > 2 || used.length + free.length < 2) return false;
      if (used.length === 2) free.forEach((e) => change(e, REMOVED));
      else if (used.length + free.length === 2) free.forEach((e) => change(e, USED));
    }
    return true;
  }

  // Walk along used edges from v, first along e: { end, length }; end is v on a cycle.
  follow(v, e) {
    let [place, edge, length] = [v, e, 0];
    for (;;) {
      place = this.graph.otherEnd(edge, place);
      length += 1;
      if (place === v) return { end: v, length };
      const next = this.at(place, USED).find((other) => other !== edge);
      if (next === undefined) return { end: place, length };
      edge = next;
    }
  }

  // Rules 4 and 5. No vertex has more than two used edges here, so they form paths and cycles.
  // Returns whether anything was removed, or null at a contradiction.
  settlePieces() {
    const { graph } = this;
    const seen = new Uint8Array(graph.n);
    let changed = false;
    for (let v = 0; v < graph.n; v += 1) {
      const used = this.at(v, USED);
      if (used.length !== 1 || seen[v]) continue;
      const { end, length } = this.follow(v, used[0]);
      seen[end] = 1;
      // A path of `length` edges has length + 1 vertices.
      const e = graph.edgeBetween(v, end);
      if (length + 1 < graph.n && e >= 0 && this.status[e] === FREE) {
        this.status[e] = REMOVED;
        changed = true;
      }
    }
    return this.hasShortCycle() ? null : changed;
  }

  hasShortCycle() {
    const { graph } = this;
    const onPath = new Uint8Array(graph.n);
    for (let v = 0; v < graph.n; v += 1) {
      if (onPath[v] || this.at(v, USED).length !== 2) continue;
      let [place, edge, length] = [v, this.at(v, USED)[0], 0];
      do {
        onPath[place] = 1;
        place = graph.otherEnd(edge, place);
        length += 1;
        edge = this.at(place, USED).find((other) => other !== edge);
      } while (edge !== undefined && place !== v);
      if (place === v && length < graph.n) return true;
    }
    return false;
  }

  // Make all forced moves; false when they end in a contradiction.
  settle() {
    for (;;) {
      if (!this.settleVertices()) return false;
      const changed = this.settlePieces();
      if (changed === null) return false;
      if (!changed) return true;
    }
  }
}

export { State, FREE, USED, REMOVED };
