"""The chain a lot must show before release, by kind of goods."""

# Made goods, kits and opening stock have no chain of this book's own behind them: a paper says
# where they come from, and a lead answers for them.
_ON_PAPER = ("paper-reference", "lead-release")
REQUIRED: dict[str, tuple[str, ...]] = {
    "own-syrup": ("collected", "boiled", "filtered", "density", "grade", "fill-temperature"),
    "received-syrup": ("receiving-decision", "density", "grade"),
    "made-product": _ON_PAPER,
    "kit": _ON_PAPER,
    "opening-stock": _ON_PAPER,
}
UNKNOWN_KIND = ("kind-of-goods",)


def missing(kind: str, present: set[str]) -> tuple[str, ...]:
    """Return what the required chain of a kind of goods still lacks, in its order.

    An unknown kind always lacks its kind: nothing unknown is complete.
    """
    return tuple(part for part in REQUIRED.get(kind, UNKNOWN_KIND) if part not in present)
