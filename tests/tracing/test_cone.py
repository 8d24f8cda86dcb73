"""Cones against an independent graph library, and the engine's plan for the walk."""

import random

import networkx
import pytest
from hypothesis import given
from hypothesis import settings as hypothesis_settings
from hypothesis import strategies as st
from hypothesis.extra.django import TestCase

from lots.models import DrawRole, Lot, StepKind
from lots.recording import _ledger
from lots.recording.errors import WouldLoop
from lots.tracing import cone
from tests.conftest import EXAMPLES
from tests.factories import sugarhouse


def random_chain(house, seed, size=14):
    """Record steps that draw random earlier lots and make one or two; return the graph."""
    dice = random.Random(seed)
    graph, lots = networkx.DiGraph(), []
    with house.context(house.owner).open("random chain") as writer:
        for _ in range(size):
            kind = StepKind.BLEND if lots else StepKind.COLLECTION
            step = writer.step(kind, house.at(), ended_at=house.at())
            graph.add_node(("step", step.pk))
            for lot in dice.sample(lots, min(len(lots), dice.randint(1, 3))):
                _ledger.take(writer, step, lot, 1, DrawRole.INGREDIENT)
                graph.add_edge(("lot", lot.pk), ("step", step.pk))
            for _ in range(dice.randint(1, 2)):
                lot = _ledger.make(
                    writer, step, house.items["syrup"], place=house.places["Store"],
                    quantity=1000, solids=660,
                )  # fmt: skip
                lots.append(lot)
                graph.add_edge(("step", step.pk), ("lot", lot.pk))
    return graph, lots


class ConeTests(TestCase):
    @classmethod
    def setUpTestData(cls):
        cls.house = sugarhouse("random-chains")

    # Each example records a chain of its own: a quarter of the usual examples fits the time.
    @hypothesis_settings(max_examples=max(12, EXAMPLES // 4))
    @given(st.integers(0, 10_000))
    def test_cones_equal_a_graph_library_and_leave_sisters_out(self, seed):
        graph, lots = random_chain(self.house, seed)
        for lot in random.Random(seed).sample(lots, 4):
            behind = networkx.ancestors(graph, ("lot", lot.pk))
            ahead = networkx.descendants(graph, ("lot", lot.pk))
            back, forward = cone.back(lot.made_by_id), cone.forward(lot.pk)
            assert {("lot", pk) for pk in back.lots} == {n for n in behind if n[0] == "lot"}
            assert {("step", pk) for pk in back.steps} == {n for n in behind if n[0] == "step"}
            assert {("step", pk) for pk in forward.steps} == {n for n in ahead if n[0] == "step"}


@pytest.mark.django_db
@pytest.mark.engine
def test_a_draw_that_closes_a_loop_is_refused(house):
    _, lots = random_chain(house, 3)
    last, first = lots[-1], lots[0]
    assert first.made_by_id in cone.back(last.made_by_id).steps
    with (
        pytest.raises(WouldLoop),
        house.context(house.owner).open("loop") as writer,
    ):
        _ledger.take(writer, first.made_by, last, 1, DrawRole.INGREDIENT)
    assert Lot.objects.get(pk=last.pk).drawn == 0
