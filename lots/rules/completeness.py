"""The chain a lot must show before release, by kind of goods."""

REQUIRED: dict[str, tuple[str, ...]] = {
    "own-syrup": ("collected", "boiled", "filtered", "density", "grade", "fill-temperature"),
    "received-syrup": ("receiving-decision", "density", "grade"),
    "made-product": ("boiled", "density"),
    "kit": (),
    "opening-stock": ("paper-reference", "lead-release"),
}


def missing(kind: str, present: set[str]) -> tuple[str, ...]:
    """Return what the required chain of a kind of goods still lacks, in its order."""
    return tuple(part for part in REQUIRED.get(kind, ("kind of goods",)) if part not in present)
