// The places of a round as the page walks through them: which one is next, which lies beside which. Pure:
// it draws nothing and sends nothing.

/** createPlaces makes the places of a round from its model; seats of a holder stand in reading order. */
export function createPlaces(model) {
  const holders = model.holders.map((h, i) =>
    h.seats.map((s, j) => ({ ...s, holder: i, rank: j, code: s.code ?? "", nth: s.nth ?? 0, own: null, ask: null, draft: null, kept: 0 })),
  );
  const all = holders.flat();
  const walked = all.filter((p) => p.state !== "empty");
  const fresh = (p) => p.state === "to-do" && !p.ask;
  const asks = (p) => (p.state === "look" || p.ask?.kind === "look" || p.ask?.kind === "refused") && !p.kept;

  /** after is where Enter goes: the next place to read; at the end of a holder first the places of it
   *  that must be read or typed again, because it is still at hand; null when nothing is left. */
  function after(p) {
    const here = holders[p.holder];
    return (
      here.slice(p.rank + 1).find(fresh) ??
      here.find((x) => x !== p && asks(x)) ??
      (asks(p) ? p : null) ??
      all.slice(all.indexOf(here[here.length - 1]) + 1).find(fresh) ??
      all.find(fresh) ??
      all.find(asks) ??
      null
    );
  }

  const step = (p, by) => walked[walked.indexOf(p) + by] ?? p;
  const inHolder = (i, rank) => {
    const seats = (holders[i] ?? []).filter((x) => x.state !== "empty");
    return seats[Math.min(rank, seats.length - 1)];
  };

  // beside is the nearest place of the holder in a direction, as it is drawn.
  function beside(p, dRow, dCol) {
    const ahead = holders[p.holder]
      .filter((x) => x.state !== "empty")
      .filter((x) => (dRow ? x.col === p.col && (x.row - p.row) * dRow > 0 : x.row === p.row && (x.col - p.col) * dCol > 0));
    return ahead.sort((a, b) => Math.abs(a.row - p.row) + Math.abs(a.col - p.col) - Math.abs(b.row - p.row) - Math.abs(b.col - p.col))[0];
  }

  /** move is the place a key leads to; over the end of a row or holder it follows the reading order. */
  function move(p, to) {
    const seats = holders[p.holder];
    const onward = seats.length > 1 && seats[1].col < seats[0].col ? -1 : 1; // read from the right
    switch (to) {
      case "left":
        return beside(p, 0, -1) ?? step(p, -onward);
      case "right":
        return beside(p, 0, 1) ?? step(p, onward);
      case "up":
        return beside(p, -1, 0) ?? inHolder(p.holder - 1, p.rank) ?? p;
      case "down":
        return beside(p, 1, 0) ?? inHolder(p.holder + 1, p.rank) ?? p;
      case "before":
        return inHolder(p.holder - 1, 0) ?? p;
      case "next":
        return inHolder(p.holder + 1, 0) ?? p;
      case "first":
        return inHolder(p.holder, 0) ?? p;
      case "last":
        return inHolder(p.holder, Infinity) ?? p;
      case "skip":
        return step(p, 1);
    }
    return p;
  }

  const counts = (list) => {
    const going = list.filter((p) => p.state !== "empty" && p.state !== "off");
    return { read: going.filter((p) => p.state === "read").length, all: going.length, looks: going.filter((p) => p.state === "look").length };
  };

  return {
    all,
    at: (holder, rank) => holders[holder]?.[rank],
    find: (holder, n) => holders[holder]?.find((p) => p.n === n),
    first: (holder) => holders[holder].find(fresh) ?? inHolder(holder, 0),
    of: (holder) => holders[holder],
    serial: (serial) => all.find((p) => p.serial === serial),
    after,
    move,
    counts,
  };
}
