"""The authorities of each jurisdiction, by name and root domain; they rule, not this book."""

US_FOOD = ("Food and Drug Administration", "fda.gov")
REGULATORS: dict[str, tuple[tuple[str, str], ...]] = {
    "US": (US_FOOD,),
    "US-VT": (
        ("Vermont Agency of Agriculture, Food and Markets", "agriculture.vermont.gov"),
        US_FOOD,
    ),
    "US-NY": (("New York Dept of Agriculture and Markets", "agriculture.ny.gov"), US_FOOD),
    "US-ME": (("Maine Dept of Agriculture, Conservation and Forestry", "maine.gov"), US_FOOD),
    "US-WI": (
        ("Wisconsin Dept of Agriculture, Trade and Consumer Protection", "datcp.wi.gov"),
        US_FOOD,
    ),
    "CA": (
        ("Canadian Food Inspection Agency", "inspection.canada.ca"),
        ("Health Canada", "canada.ca"),
    ),
}
