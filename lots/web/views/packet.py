"""Packets: the records of a lot, as PDF, spreadsheet or print view."""

from uuid import UUID

from django.http import Http404, HttpRequest, HttpResponse
from django.utils import timezone

from lots.documents import packet, packet_pdf, packet_xlsx
from lots.rules.roles import Action
from lots.web.access import allow, facility_of, get_lot

SHEET = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
# The print view carries its own style; nothing else is allowed to it.
PRINT_POLICY = "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'"


@allow(Action.ISSUE_PACKET)
def lot_packet(request: HttpRequest, slug: str, uuid: UUID, form: str) -> HttpResponse:
    """Hand over one lot's packet."""
    lot = get_lot(request, uuid)
    made = packet.build(facility_of(request), [lot], timezone.now())
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
    response.headers["Content-Disposition"] = f'attachment; filename="packet-{lot.code}.{form}"'
    return response
