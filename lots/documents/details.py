"""What a step keeps beyond its header, in words: the same on its page and in a packet."""

from lots.models import Step

LABELS = {
    "address": "Delivered to",
    "amount": "Amount",
    "book": "By the book",
    "break": "Cleaning",
    "carrier": "Carrier",
    "clarity": "Clarity seen",
    "condition": "Condition",
    "counted": "Counted",
    "decision": "Decision",
    "defects": "Defects",
    "filter": "Filter",
    "from": "From",
    "lot": "Lot",
    "net_sample": "Net-content sample",
    "not_measured": "Not measured because",
    "packages": "Packages",
    "permeate": "Permeate",
    "pressure": "Pressure",
    "reason": "Reason",
    "rejected": "Rejected",
    "seals": "Seals",
    "since_last_run": "Since the last run",
    "statement": "Allergen and food-grade statement",
    "strength": "Strength",
    "temperature": "Temperature",
    "verified_by": "Verified by",
}
# Kept for the program: a code reserved, a move's way back.
INTERNAL = frozenset({"from_uuid", "lot_uuid", "printed_code", "quantity"})


def rows(step: Step) -> list[tuple[str, str]]:
    """Return (label, value) of each detail that was typed, its unit beside it."""
    found = []
    for key, value in sorted(step.detail.items()):
        if key in INTERNAL or key.endswith("_unit") or value in ("", None, [], {}):
            continue
        unit = step.detail.get(f"{key}_unit", "")
        label = LABELS.get(key, key.replace("_", " ").capitalize())
        found.append((label, f"{_words(value)} {unit}".strip()))
    return found


def _words(value: object) -> str:
    if isinstance(value, dict):
        return ", ".join(f"{key} {one}" for key, one in sorted(value.items()) if one)
    if isinstance(value, list):
        return ", ".join(" ".join(one) if isinstance(one, list) else str(one) for one in value)
    return str(value)


def sentence(step: Step) -> str:
    """Return the details in one line."""
    return "; ".join(f"{label}: {value}" for label, value in rows(step))
