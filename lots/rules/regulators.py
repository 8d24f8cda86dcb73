"""The authorities of each jurisdiction, by name and root domain; they rule, not this book."""

Regulator = tuple[str, str]

FDA: Regulator = ("Food and Drug Administration", "fda.gov")
REPORTABLE_FOOD: Regulator = (
    "Reportable Food Registry, through the Safety Reporting Portal",
    "safetyreporting.hhs.gov",
)
ORGANIC: Regulator = (
    "USDA Agricultural Marketing Service, National Organic Program",
    "ams.usda.gov",
)
WEIGHTS: Regulator = ("NIST Office of Weights and Measures", "nist.gov")
UNITED_STATES = (FDA, REPORTABLE_FOOD, ORGANIC, WEIGHTS)
CANADA: tuple[Regulator, ...] = (
    ("Canadian Food Inspection Agency", "inspection.canada.ca"),
    ("Health Canada", "canada.ca"),
)
# The state or province stands first: it is who visits.
REGULATORS: dict[str, tuple[Regulator, ...]] = {
    "US": UNITED_STATES,
    "US-CT": (
        ("Connecticut Department of Agriculture", "portal.ct.gov"),
        ("Connecticut Department of Consumer Protection", "portal.ct.gov"),
        *UNITED_STATES,
    ),
    "US-MA": (
        ("Massachusetts Department of Agricultural Resources", "mass.gov"),
        ("Massachusetts Department of Public Health, Food Protection Program", "mass.gov"),
        *UNITED_STATES,
    ),
    "US-ME": (
        (
            "Maine Department of Agriculture, Conservation and Forestry",
            "maine.gov",
        ),
        *UNITED_STATES,
    ),
    "US-MI": (
        ("Michigan Department of Agriculture and Rural Development", "michigan.gov"),
        *UNITED_STATES,
    ),
    "US-MN": (("Minnesota Department of Agriculture", "mda.state.mn.us"), *UNITED_STATES),
    "US-NH": (
        ("New Hampshire Department of Agriculture, Markets and Food", "agriculture.nh.gov"),
        ("New Hampshire Department of Health and Human Services", "dhhs.nh.gov"),
        *UNITED_STATES,
    ),
    "US-NY": (
        ("New York State Department of Agriculture and Markets", "agriculture.ny.gov"),
        *UNITED_STATES,
    ),
    "US-OH": (
        ("Ohio Department of Agriculture, Division of Food Safety", "agri.ohio.gov"),
        *UNITED_STATES,
    ),
    "US-PA": (
        (
            "Pennsylvania Department of Agriculture, Bureau of Food Safety and Laboratory Services",
            "pa.gov",
        ),
        *UNITED_STATES,
    ),
    "US-VT": (
        ("Vermont Agency of Agriculture, Food and Markets", "agriculture.vermont.gov"),
        *UNITED_STATES,
    ),
    "US-WI": (
        (
            "Wisconsin Department of Agriculture, Trade and Consumer Protection",
            "datcp.wi.gov",
        ),
        *UNITED_STATES,
    ),
    "CA": CANADA,
    "CA-QC": (
        (
            "Ministère de l'Agriculture, des Pêcheries et de l'Alimentation du Québec",
            "mapaq.gouv.qc.ca",
        ),
        *CANADA,
    ),
}
