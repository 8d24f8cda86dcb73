"""A season's chart: sap above, syrup below, a bar a day, each on its own scale from nought."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from datetime import date, timedelta
from html import escape
from math import ceil, floor, log10

from . import lettering

LEFT, RIGHT, HEAD, PANEL, FOOT = 84, 16, 44, 150, 34
SIZE = 13
INK, SOFT, LINE, GROUND = "#1B2A24", "#4A5650", "#CFD4CC", "#FBFAF6"
FONT = "Lot Next, Verdana, sans-serif"


@dataclass(frozen=True)
class Series:
    """One panel: its name, its unit, and what each day has; a day not named has nothing."""

    name: str
    unit: str
    fill: str
    values: dict[date, float]


def svg(series: Sequence[Series], title: str) -> str:
    """Return the chart of some series over the days they cover, or an empty text for no day."""
    days = sorted({day for one in series for day in one.values})
    if not days:
        return ""
    count = (days[-1] - days[0]).days + 1
    step = 24 if count <= 60 else 12 if count <= 130 else 6
    width = max(LEFT + count * step, LEFT + 96) + RIGHT
    height = (HEAD + PANEL) * len(series) + FOOT

    def x_of(day: date) -> int:
        return LEFT + (day - days[0]).days * step

    panels = [
        _panel(one, (HEAD + PANEL) * place + HEAD, x_of, step, width)
        for place, one in enumerate(series)
    ]
    told = f"{days[0].day} {days[0]:%B %Y} to {days[-1].day} {days[-1]:%B %Y}"
    return (
        f'<svg class="chart" xmlns="http://www.w3.org/2000/svg" role="img" '
        f'viewBox="0 0 {width} {height}" width="{width}" height="{height}" '
        f'aria-labelledby="chart-title chart-desc"><title id="chart-title">{escape(title)}</title>'
        f'<desc id="chart-desc">A bar a day, {told}. The table says the same.</desc>'
        f'<rect width="{width}" height="{height}" fill="{GROUND}"/>'
        f"{''.join(panels)}{_days(days[0], count, step, height - FOOT, width)}</svg>"
    )


def _panel(one: Series, top: int, x_of: Callable[[date], int], step: int, width: int) -> str:
    most = nice(max(one.values.values(), default=0.0))
    bottom = top + PANEL
    parts = [_text(4, top - 20, f"{one.name}, {one.unit}", bold=True)]
    for share in (0.0, 0.5, 1.0):
        y = bottom - share * PANEL
        parts.append(f'<path d="M{LEFT} {y:g}H{width - RIGHT}" stroke="{LINE}"/>')
        words = f"{most * share:,.10g}"
        parts.append(_text(LEFT - 8 - lettering.width(words, SIZE), y + 4.5, words))
    for day, value in sorted(one.values.items()):
        high = round(value / most * PANEL, 2)
        parts.append(
            f"<g><title>{day.day} {day:%B}: {value:,.1f} {escape(one.unit)}</title>"
            f'<rect class="day" x="{x_of(day) + 1}" y="{bottom - high:g}" width="{step - 2}" '
            f'height="{high:g}" fill="{one.fill}" stroke="{INK}" stroke-width="0.75"/></g>'
        )
    return "".join(parts)


def _days(first: date, count: int, step: int, top: int, width: int) -> str:
    """Return the names of days beneath, as many as fit, at a steady distance."""
    every = max(1, ceil(lettering.width("30 Sep 2026", SIZE) * 1.15 / step))
    every = 7 * ceil(every / 7) if every > 3 else every
    parts = []
    year = 0
    for number in range(0, count, every):
        day = first + timedelta(days=number)
        words = f"{day.day} {day:%b}" if day.year == year else f"{day.day} {day:%b %Y}"
        x = LEFT + number * step
        if number and x + lettering.width(words, SIZE) > width:
            break
        year = day.year
        parts.append(f'<path d="M{x} {top}V{top + 6}" stroke="{INK}"/>{_text(x, top + 22, words)}')
    return "".join(parts)


def nice(most: float) -> float:
    """Return the round number at or above a value where its scale ends; 1 for next to nothing."""
    if most < 1e-6:
        return 1.0
    power = 10.0 ** floor(log10(most))
    ends = (step * power for step in (1, 2, 3, 4, 5, 6, 8))
    return next((end for end in ends if end >= most * 0.9999), 10 * power)


def _text(x: float, y: float, words: str, bold: bool = False) -> str:
    weight = ' font-weight="700"' if bold else ""
    return (
        f'<text x="{x:g}" y="{y:g}" font-family="{FONT}" font-size="{SIZE}"{weight} '
        f'fill="{INK}">{escape(words)}</text>'
    )
