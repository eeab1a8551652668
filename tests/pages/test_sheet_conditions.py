import pytest

pytestmark = pytest.mark.django_db


@pytest.mark.parametrize(
    ("field", "typed", "stored"),
    [
        ("solvent_volume_ml", "0.5 L", 500),
        ("solvent_volume_ml", "1,2 mL", 1.2),
        ("temperature_c", "383.15 K", 110),
        ("temperature_c", "−78 °C", -78),
        ("duration_min", "1 h 30 min", 90),
        ("duration_min", "3 d", 4320),
        ("duration_min", "", None),
    ],
)
def test_quantities_are_understood_with_their_units(
    signed_in, author, planned, sheet_of, typed_conditions, stored_again, field, typed, stored
):
    response = signed_in(author).post(
        sheet_of(planned, "conditions"), typed_conditions(**{field: typed})
    )
    assert response.status_code == 302
    value = getattr(stored_again(planned), field)
    assert value == stored if stored is None else value == pytest.approx(stored)


@pytest.mark.parametrize(
    ("field", "typed", "word"),
    [
        ("solvent_volume_ml", "250", "has no unit"),
        ("solvent_volume_ml", "250 mg", "no unit of a volume"),
        ("solvent_volume_ml", "-5 mL", "below 0"),
        ("temperature_c", "-300 °C", "absolute zero"),
        ("duration_min", "overnight", "overnight"),
        ("duration_min", "NaN h", "NaN h"),
        ("performed_on", "yesterday", "2026-03-31"),
        ("atmosphere", "neon", "neon"),
    ],
)
def test_what_is_not_understood_is_said_at_its_field_and_stays_typed(
    signed_in, author, planned, sheet_of, typed_conditions, stored_again, field, typed, word
):
    response = signed_in(author).post(
        sheet_of(planned, "conditions"), typed_conditions(**{field: typed, "solvent": "xylene"})
    )
    assert response.status_code == 422
    form = response.context["parts"]["conditions"].form
    assert word in " ".join(form.errors[field])
    page = response.content.decode()
    assert 'value="xylene"' in page
    assert f'id="id_conditions-{field}_error"' in page
    assert 'aria-invalid="true"' in page
    if field != "atmosphere":
        assert f'value="{typed}"' in page
    assert stored_again(planned).solvent == "toluene"


def test_a_quantity_left_as_shown_keeps_its_full_precision(
    signed_in, author, planned, sheet_of, typed_conditions, stored_again
):
    planned.solvent_volume_ml = 123.456789
    planned.save()
    typed = typed_conditions(solvent_volume_ml="123.5 mL", temperature_c="30 °C")
    signed_in(author).post(sheet_of(planned, "conditions"), typed)
    again = stored_again(planned)
    assert again.solvent_volume_ml == 123.456789
    assert again.temperature_c == 30
    fields = [change["field"] for change in again.revisions.last().changes]
    assert fields == ["temperature_c"]


def test_saving_what_is_stored_already_writes_no_revision(
    signed_in, author, planned, sheet_of, typed_conditions, stored_again
):
    signed_in(author).post(sheet_of(planned, "conditions"), typed_conditions())
    assert stored_again(planned).version == planned.version


def test_an_enhanced_save_answers_with_the_part_and_what_follows(
    signed_in, author, planned, sheet_of, typed_conditions
):
    response = signed_in(author, enhanced=True).post(
        sheet_of(planned, "conditions"), typed_conditions(temperature_c="60 °C")
    )
    page = response.content.decode()
    assert response.status_code == 200
    assert page.lstrip().startswith('<section class="part" id="conditions"')
    assert 'value="60 °C"' in page
    assert 'name="seen_version" value="2"' in page
    for following in ("sheet-head", "cautions", "composition", "found", "standing", "history"):
        assert f'id="{following}" hx-swap-oob="true"' in " ".join(page.split()) or (
            f'id="{following}"' in page
        )
    assert "60 °C is above the flash point of toluene" in page


def test_an_enhanced_error_answers_with_the_part_alone(
    signed_in, author, planned, sheet_of, typed_conditions
):
    response = signed_in(author, enhanced=True).post(
        sheet_of(planned, "conditions"), typed_conditions(duration_min="soon")
    )
    page = response.content.decode()
    assert response.status_code == 422
    assert "hx-swap-oob" not in page
    assert 'value="soon"' in page
    assert "data-unsaved" in page


def test_a_volume_that_cannot_dissolve_the_cage_is_said(
    signed_in, author, planned, sheet_of, typed_conditions
):
    # C60 in toluene at 25 °C: 2.8 mg/mL; from memory, after Ruoff, Tse, Malhotra, Lorents,
    # J. Phys. Chem. 1993, 97, 3379. So 500 mg don't dissolve in 50 mL and do in 250 mL.
    client = signed_in(author)
    assert "dissolves the cage at 25 °C" in client.get(sheet_of(planned)).content.decode()
    page = signed_in(author, enhanced=True).post(
        sheet_of(planned, "conditions"), typed_conditions(solvent_volume_ml="50 mL")
    )
    assert "50 mL of toluene dissolves 140 mg of C60" in page.content.decode()
