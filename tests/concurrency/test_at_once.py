"""Two people, one drum; one form, sent twice; four people recording all day."""

from functools import partial
from uuid import uuid4

import pytest

from lots.models import Draw, JournalEntry, Lot, PrintedCode, Step, StepKind
from lots.recording import container_fill, decisions, goods_out, sap, syrup
from lots.recording._door import AlreadyRecorded
from lots.recording._sources import FromLot, FromVessel
from lots.recording.context import Context
from lots.recording.errors import NotEnough, OnHold, SentBefore
from lots.recording.measures import NOT_MEASURED
from lots.tracing import verify
from tests.concurrency.together import raised, together
from tests.factories import gallons, pieces

pytestmark = [pytest.mark.engine]


def no_faults(book):
    book.facility.chain.refresh_from_db()
    assert list(verify.chain_faults(book.facility.chain)) == []
    assert list(verify.ledger_faults()) == []


def last_drum(book):
    book.collect()
    return book.boil(into="Drum 1").made_lots.get(item=book.items["syrup"])


def pour(book, by, source, into="Batch tank"):
    return syrup.record_mixture(
        book.context(by, hours=5),
        kind=StepKind.TRANSFER,
        at=book.at(5),
        sources=[source],
        into=book.places[into],
        item=book.items["syrup"],
    )


@pytest.mark.parametrize("amount", [gallons("8"), gallons("5"), NOT_MEASURED])
def test_the_last_drum_drawn_by_two_people_at_once_goes_to_one(book, amount):
    drum = last_drum(book)
    entries = JournalEntry.objects.count()
    source = FromVessel(book.places["Drum 1"], amount)

    answers = together(
        partial(pour, book, book.recorder, source),
        partial(pour, book, book.lead, source, "Canner"),
    )

    assert len(raised(answers, NotEnough)) == 1, answers
    assert sum(isinstance(answer, Step) for answer in answers) == 1
    assert Draw.objects.filter(lot=drum).count() == 1
    assert JournalEntry.objects.count() == entries + 1
    no_faults(book)


def test_the_last_jars_sold_by_two_people_at_once_go_to_one_customer(book):
    jars = book.jars()

    def sell(by):
        return goods_out.record_sale(
            book.context(by, hours=7),
            at=book.at(7),
            sold=[FromLot(jars, pieces(15))],
            customer=book.customer,
        )

    answers = together(partial(sell, book.recorder), partial(sell, book.lead))

    assert len(raised(answers, NotEnough)) == 1, answers
    jars.refresh_from_db()
    assert (jars.remaining, jars.shipped) == (5, 15)
    no_faults(book)


def collect_once(book, form, amount):
    context = Context(book.facility, book.recorder, book.at(), client=(form, {"amount": amount}))
    return sap.record_collection(
        context,
        at=book.at(),
        woods=book.places["North woods"],
        tank=book.places["Tank 1"],
        item=book.items["sap"],
        amount=gallons(amount),
    )


def test_the_same_form_sent_four_times_at_once_is_one_record(book):
    act = partial(collect_once, book, uuid4(), "10")

    answers = together(act, act, act, act)

    again = raised(answers, AlreadyRecorded)
    (step,) = (answer for answer in answers if isinstance(answer, Step))
    assert [answer.step for answer in again] == [step] * 3
    assert Lot.objects.filter(item=book.items["sap"]).count() == 1
    no_faults(book)


def test_the_same_form_with_other_content_at_once_is_one_record_and_one_refusal(book):
    form = uuid4()

    answers = together(
        partial(collect_once, book, form, "10"), partial(collect_once, book, form, "11")
    )

    assert len(raised(answers, SentBefore)) == 1, answers
    assert Lot.objects.filter(item=book.items["sap"]).count() == 1
    no_faults(book)


def test_twenty_recordings_from_four_people_give_one_chain_and_twenty_codes(book):
    book.facility.chain.refresh_from_db()
    before = book.facility.chain.seq

    def five(by):
        return [collect_once(book, uuid4(), str(number + 1)) for number in range(5)]

    answers = together(*[partial(five, book.recorder)] * 4)

    assert raised(answers, Exception) == []
    book.facility.chain.refresh_from_db()
    assert book.facility.chain.seq == before + 20
    codes = Lot.objects.values_list("code", flat=True)
    assert len(set(codes)) == len(codes) == 20
    no_faults(book)


def test_runs_opened_at_once_take_different_printed_codes(book):
    def run(by):
        return container_fill.open_container_fill(
            book.context(by, hours=6), at=book.at(6), product=book.items["quart"]
        )[1].text

    answers = together(*[partial(run, by) for by in (book.recorder, book.lead, book.owner)])

    assert sorted(answers) == sorted(PrintedCode.objects.values_list("text", flat=True))
    assert len(set(answers)) == 3


def test_a_hold_and_a_sale_at_once_never_leave_held_goods_sold_after_the_hold(book):
    jars = book.jars()
    sell = partial(
        goods_out.record_sale,
        book.context(hours=7),
        at=book.at(7),
        sold=[FromLot(jars, pieces(4))],
    )
    hold = partial(
        decisions.place_hold, book.context(book.lead, hours=7), lot=jars, reason="glass broke"
    )

    sold, held = together(sell, hold)

    assert isinstance(held, list)
    assert isinstance(sold, Step | OnHold)
    acts = list(
        JournalEntry.objects.filter(action__in=["sale", "hold"]).values_list("action", flat=True)
    )
    assert acts == (["sale", "hold"] if isinstance(sold, Step) else ["hold"])
    no_faults(book)


def test_two_facilities_record_at_once_without_waiting_on_each_others_codes(book):
    from tests.factories import sugarhouse

    other = sugarhouse("other-place")

    answers = together(*[partial(house.collect, "50") for house in (book, other, book, other)])

    assert raised(answers, Exception) == []
    no_faults(book)
    no_faults(other)
    assert Lot.objects.filter(facility=other.facility).count() == 2
