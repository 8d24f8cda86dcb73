"""Packets: the records of a lot, as PDF, spreadsheet or print view."""

from uuid import UUID

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import render
from django.utils import timezone

from lots.documents import packet, packet_pdf, packet_xlsx
from lots.models import Lot
from lots.rules.roles import Action
from lots.web.access import allow, facility_of, get_lot
from lots.web.forms.packet import PacketForm

SHEET = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
# The print view carries its own style; nothing else is allowed to it.
PRINT_POLICY = "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'"


@allow(Action.ISSUE_PACKET)
def lot_packet(request: HttpRequest, slug: str, uuid: UUID, form: str) -> HttpResponse:
    """Hand over one lot's packet."""
    lot = get_lot(request, uuid)
    return _answer(request, [lot], form, f"packet-{lot.code}")


@allow(Action.ISSUE_PACKET)
def packets(request: HttpRequest, slug: str) -> HttpResponse:
    """Ask for a packet of lots or days, and hand it over."""
    asked = PacketForm(facility_of(request), request.GET if "form" in request.GET else None)
    if asked.is_bound and asked.is_valid():
        return _answer(request, asked.cleaned_data["lots"], asked.cleaned_data["form"], "packet")
    status = 422 if asked.errors else 200
    return render(request, "lots/packets.html", {"form": asked, "title": "Packets"}, status=status)


def _answer(request: HttpRequest, lots: list[Lot], form: str, name: str) -> HttpResponse:
    made = packet.build(facility_of(request), lots, timezone.now())
    if form == "xlsx":
        response = HttpResponse(packet_xlsx.xlsx(made), content_type=SHEET)
    elif form == "pdf":
        try:
            response = HttpResponse(packet_pdf.pdf(made), content_type="application/pdf")
        except packet_pdf.PdfNotAvailable as error:
            return HttpResponse(str(error), status=503, content_type="text/plain; charset=utf-8")
    elif form == "html":
        response = HttpResponse(packet_pdf.html(made))
        response.headers["Content-Security-Policy"] = PRINT_POLICY
        return response
    else:
        raise Http404
    response.headers["Content-Disposition"] = f'attachment; filename="{name}.{form}"'
    return response
