"""What a label's grade words mean: a colour class, Processing Grade, or nothing we can read."""

import re
import unicodedata

PROCESSING = "processing"
NAMES = {"golden": "Golden", "amber": "Amber", "dark": "Dark", "very-dark": "Very Dark"}
# The class names and taste words of both official texts (Canadian Grade Compendium Vol. 7; US
# Standards for Grades of Maple Syrup, 2015), folded.
_WORDS: dict[str, tuple[tuple[str, ...], tuple[str, ...]]] = {
    "golden": (("golden", "dore"), ("delicate", "delicat")),
    "amber": (("amber", "ambre"), ("rich", "riche")),
    "dark": (("dark", "fonce"), ("robust", "robuste")),
    "very-dark": (("very dark", "tres fonce"), ("strong", "prononce")),
}
_AROUND = frozenset(
    {"grade", "categorie", "a", "us", "canada", "ontario", "quebec", "color", "colour", "couleur"}
    | {"class", "classe", "taste", "flavor", "flavour", "gout", "and", "et"}
)
_PROCESSING = frozenset({"processing", "transformation"})


def read(text: str) -> str | None:
    """Return golden, amber, dark, very-dark, processing, or ``None`` for any other words.

    Names from before 2015 ("Medium Amber", "Grade B") are no class of today and give ``None``.
    """
    plain = unicodedata.normalize("NFKD", text.casefold())
    words = re.findall(r"[a-z]+", "".join(c for c in plain if not unicodedata.combining(c)))
    left = " ".join(word for word in words if word not in _AROUND)
    if left in _PROCESSING or left == "de transformation":
        return PROCESSING
    for key, (names, tastes) in _WORDS.items():
        if left in names or left in {f"{name} {taste}" for name in names for taste in tastes}:
            return key
    return None
