import pytest

from reactions.models import State
from reactions.services.inputs import (
    ConclusionInput,
    FractionInput,
    IsolationStepInput,
    ObservationInput,
    ReadingInput,
)
from reactions.services.revising import Edit
from reactions.services.run import (
    add_observation,
    add_reading,
    amend_conclusion,
    amend_isolation,
)
from reactions.services.states import move, sign

pytestmark = pytest.mark.django_db


@pytest.fixture
def page(signed_in, author, reader, planned, sheet_of):
    edit = Edit(author, planned.pk)
    add_observation(edit, ObservationInput(at_min=35, text="purple to wine red"))
    add_reading(edit, ReadingInput(method="nmr", mole_fraction_by_level={0: 0.4, 1: 0.6}))
    fraction = FractionInput(name="F2", mass_mg=231.5, level=1, purity=0.985)
    amend_isolation(edit, [IsolationStepInput(method="column", fractions=[fraction])])
    amend_conclusion(edit, ConclusionInput(conclusion="Clean enough."))
    for state in (State.RUNNING, State.COMPLETED):
        move(edit, state)
    sign(edit)
    return signed_in(reader).get(sheet_of(planned, name="print")).content.decode()


def test_the_print_has_everything_of_the_record(page, planned):
    for said in (
        "ACC-1 Diethyl malonate mono-adduct",
        "mono : multi at least 5 : 1",
        "diethyl bromomalonate",
        "purple to wine red",
        "unreacted 40.0 %, mono 60.0 %",
        "231.5 mg",
        "98.5 %",
        "Clean enough.",
        "Highly flammable liquid and vapour",
        "P210",
        planned.signatures.get().digest,
        "isolation amended",
    ):
        assert said in page


def test_the_print_has_no_navigation_and_no_form(page):
    assert "<form" not in page
    assert "masthead" not in page
    assert "<input" not in page


def test_an_open_record_has_room_for_names_by_hand(signed_in, author, planned, sheet_of):
    page = signed_in(author).get(sheet_of(planned, name="print")).content.decode()
    assert "Not signed." in page
    assert "paper-lines" in page
