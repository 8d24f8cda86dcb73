"""Folded text: what people type and what stands on labels meet."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.identification.folding import fold


@pytest.mark.parametrize(
    ("typed", "written"),
    [
        ("erable", "ÉRABLE"), ("Érable", "e\u0301rable"), ("COEUR", "cœur"), ("strasse", "Straße"),
        ("cote et fils", "  Côté  et Fils "), ("sirop d'erable", "Sirop d’Érable"),
        ("ﬁlter", "filter"), ("１２", "12"),
    ],
)  # fmt: skip
def test_what_is_the_same_to_a_reader_is_the_same(typed, written):
    assert fold(typed) == fold(written)


@given(st.text())
def test_folding_twice_is_folding_once(text):
    assert fold(fold(text)) == fold(text)
