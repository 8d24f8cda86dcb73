"""A packet as PDF: only files shipped with the book are read, nothing from the network."""

import hashlib
from pathlib import Path
from typing import Any

from django.conf import settings
from django.template.loader import render_to_string

from .packet import Packet

FONTS = Path(settings.BASE_DIR) / "lots" / "web" / "static" / "fonts"
NAMES = ("next-400.woff2", "next-700.woff2", "mono-400.woff2")
NO_PANGO = (
    "PDF needs the Pango library: Debian/Ubuntu apt install libpango-1.0-0 libpangoft2-1.0-0; "
    "Fedora dnf install pango; macOS brew install pango; Windows: MSYS2, "
    "pacman -S mingw-w64-x86_64-pango. The print view stands in."
)


class PdfNotAvailable(Exception):
    """Pango is missing on this machine; the message names the package."""


def html(packet: Packet) -> str:
    """Return the packet as one page of HTML, for print and for PDF."""
    return render_to_string("documents/packet.html", {"packet": packet})


def pdf(packet: Packet) -> bytes:
    """Return the packet as PDF: the same packet gives the same bytes.

    Raises PdfNotAvailable where Pango is missing.
    """
    try:
        from weasyprint import HTML
        from weasyprint.urls import URLFetcher, URLFetcherResponse
    except OSError as error:
        raise PdfNotAvailable(NO_PANGO) from error

    class Shipped(URLFetcher):
        """Give the book's own fonts by name and refuse everything else."""

        def __init__(self) -> None:
            super().__init__(allowed_protocols=("asset",), allow_redirects=False)

        def fetch(self, url: str, headers: Any = None) -> Any:
            scheme, _, name = url.partition(":")
            if scheme == "asset" and name in NAMES:
                data = (FONTS / name).read_bytes()
                return URLFetcherResponse(url, data, {"Content-Type": "font/woff2"})
            raise ValueError(f"refused: {url[:80]}")

    text = html(packet)
    identifier = hashlib.sha256(text.encode()).digest()[:16]
    made: bytes = HTML(string=text, url_fetcher=Shipped()).write_pdf(pdf_identifier=identifier)
    return made
