"""Quantities as people type them."""

from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.quantities import (
    Quantity,
    QuantityError,
    amount_mmol,
    density_g_per_ml,
    duration_min,
    fraction,
    mass_mg,
    molarity_mol_per_l,
    quantity,
    temperature_c,
    volume_ml,
)

READERS = [
    mass_mg,
    volume_ml,
    amount_mmol,
    molarity_mol_per_l,
    density_g_per_ml,
    temperature_c,
    duration_min,
    fraction,
    quantity,
]


def refusal(reader, text):
    with pytest.raises(QuantityError) as caught:
        reader(text)
    return str(caught.value)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("0.25 g", 250.0),
        ("250 mg", 250.0),
        ("250mg", 250.0),
        ("  250  mg ", 250.0),
        (".5 g", 500.0),
        ("5. mg", 5.0),
        ("500 µg", 0.5),
        ("500 μg", 0.5),  # Greek mu
        ("500 ug", 0.5),
        ("1 kg", 1e6),
        ("1.2e-3 g", 1.2),
        ("0 mg", 0.0),
        ("250\u00a0mg", 250.0),  # a blank that doesn't break
        ("1,2 g", 1200.0),
        ("0,125 g", 125.0),
        ("12,5 mg", 12.5),
    ],
)
def test_masses(text, expected):
    assert mass_mg(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [("1.2 mL", 1.2), ("500 µL", 0.5), ("500 uL", 0.5), ("3 cm³", 3.0), ("0.5 L", 500.0)],
)
def test_volumes(text, expected):
    assert volume_ml(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"), [("3 mmol", 3.0), ("0.1 mol", 100.0), ("50 µmol", 0.05)]
)
def test_amounts_of_substance(text, expected):
    assert amount_mmol(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [("1.6 M", 1.6), ("0.5 mol/L", 0.5), ("0.5 mol/l", 0.5), ("100 mM", 0.1), ("2 mol L⁻¹", 2.0)],
)
def test_concentrations(text, expected):
    assert molarity_mol_per_l(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"), [("0.867 g/mL", 0.867), ("867 g/L", 0.867), ("0.867 g cm⁻³", 0.867)]
)
def test_densities(text, expected):
    assert density_g_per_ml(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("110 °C", 110.0),
        ("110 C", 110.0),
        ("110°C", 110.0),
        ("383 K", 109.85),
        ("-78 °C", -78.0),
        ("−78 °C", -78.0),  # a true minus sign
        ("0 K", -273.15),
    ],
)
def test_temperatures(text, expected):
    assert temperature_c(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("2 h", 120.0),
        ("40 min", 40.0),
        ("1 d", 1440.0),
        ("1 h 30 min", 90.0),
        ("1h30min", 90.0),
        ("1 d 6 h", 1800.0),
        ("1.5 h", 90.0),
        ("90 s", 1.5),
        ("18 hours", 1080.0),
    ],
)
def test_times(text, expected):
    assert duration_min(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [("97 %", 0.97), ("97%", 0.97), ("0.97", 0.97), ("0,975", 0.975), ("100 %", 1.0), ("1", 1.0)],
)
def test_shares(text, expected):
    assert fraction(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("250 mg", Quantity("mass", 250.0, "mg")),
        ("1.2 mL", Quantity("volume", 1.2, "mL")),
        ("3 mmol", Quantity("amount", 3.0, "mmol")),
        ("1.6 M", Quantity("molarity", 1.6, "mol/L")),
    ],
)
def test_the_unit_tells_what_kind_of_quantity_it_is(text, expected):
    assert quantity(text) == expected


@pytest.mark.parametrize(
    ("reader", "text", "message"),
    [
        (mass_mg, "250", "250 has no unit; write 250 mg or 250 g."),
        (volume_ml, "1.2", "1.2 has no unit; write 1.2 mL or 1.2 µL."),
        (temperature_c, "110", "110 has no unit; write 110 °C or 110 K."),
        (duration_min, "2", "2 has no unit; write 2 min or 2 h."),
        (quantity, "250", "250 has no unit; write 250 mg, 250 mL, 250 mmol or 250 M."),
        (fraction, "97", "97 is more than 1; write 97 % or 0.97."),
    ],
)
def test_a_bare_number_is_refused_with_the_choices(reader, text, message):
    assert refusal(reader, text) == message


@pytest.mark.parametrize(
    ("reader", "text", "message"),
    [
        (mass_mg, "1,250 mg", "“1,250 mg” can be read two ways; write 1250 mg or 1.250 mg."),
        (duration_min, "1:30", "“1:30” can be read two ways; write it like 1 h 30 min."),
        (mass_mg, "1 250 mg", "“1 250 mg” holds two numbers; write one, like 250 mg."),
        (mass_mg, "1.250,5 g", "“1.250,5 g” holds two numbers; write one, like 250 mg."),
        (temperature_c, "110-115 °C", "“110-115 °C” holds two numbers; write one, like 110 °C."),
        (temperature_c, "110 ± 5 °C", "“110 ± 5 °C” holds two numbers; write one, like 110 °C."),
        (mass_mg, "5 Mg", "“Mg” is no unit of a mass; use kg, g, mg, µg."),
        (duration_min, "2 h 2 h", "“2 h 2 h” is no one time; write it like 1 d 6 h 30 min."),
    ],
)
def test_what_can_be_read_two_ways_is_asked_about(reader, text, message):
    assert refusal(reader, text) == message


@pytest.mark.parametrize(
    ("reader", "text", "part"),
    [
        (duration_min, "overnight", "“overnight” is no length of time; write it in min, h or d"),
        (temperature_c, "rt", "“rt” is not a number with a unit; write it like 110 °C"),
        (temperature_c, "230 F", "“F” is no unit of a temperature; use °C, K"),
        (temperature_c, "-300 °C", "-300 °C lies below absolute zero"),
        (temperature_c, "-1 K", "-1 K lies below absolute zero"),
        (mass_mg, "3 mL", "“mL” is no unit of a mass"),
        (mass_mg, "-5 mg", "-5 mg is below 0; give 0 or more"),
        (mass_mg, "~5 mg", "“~5 mg” is not a number with a unit; write it like 250 mg"),
        (mass_mg, "nan mg", "is not a number with a unit"),
        (mass_mg, "inf mg", "is not a number with a unit"),
        (mass_mg, "1e400 g", "is beyond any quantity"),
        (mass_mg, "1e308 kg", "is beyond any quantity"),
        (mass_mg, "1e999999999 g", "is beyond any quantity"),
        (mass_mg, "", "Nothing is typed"),
        (mass_mg, "   ", "Nothing is typed"),
        (mass_mg, "1" * 101 + " mg", "104 characters are too long"),
        (fraction, "150 %", "150 % is outside 0 to 100 %"),
        (fraction, "-5 %", "-5 % is outside 0 to 100 %"),
        (fraction, "97 mg", "“97 mg” is no share; write 97 % or 0.97"),
        (quantity, "3 eq", "“eq” is no unit known here"),
        (quantity, "110 °C", "“°C” is no unit known here"),
        (molarity_mol_per_l, "1.6 m", "“m” is no unit of a concentration"),
    ],
)
def test_what_is_no_such_quantity_is_refused_with_the_reason(reader, text, part):
    assert part in refusal(reader, text)


@given(st.sampled_from(READERS), st.text(max_size=40))
def test_any_text_is_read_or_refused_in_words(reader, text):
    message = ""
    try:
        reader(text)
    except QuantityError as error:
        message = str(error)
    assert not message or message.endswith(".")


NUMBERS = st.decimals(min_value=0, max_value=10**6, places=4, allow_nan=False).map(str)


@given(NUMBERS)
def test_one_unit_and_the_other_give_the_very_same_value(digits):
    assert mass_mg(f"{digits} g") == mass_mg(f"{digits}e3 mg") == mass_mg(f"{digits}e6 µg")
    assert volume_ml(f"{digits} L") == volume_ml(f"{digits}e6 µL")


@given(NUMBERS)
def test_the_decimal_mark_may_be_a_comma(digits):
    assert mass_mg(f"{digits} g") == mass_mg(f"{digits.replace('.', ',')} g")


@given(st.integers(0, 400), st.integers(0, 23), st.integers(0, 59))
def test_days_hours_and_minutes_add_up(days, hours, minutes):
    assert duration_min(f"{days} d {hours} h {minutes} min") == (days * 24 + hours) * 60 + minutes


@given(st.floats(0, 1e6, allow_nan=False))
def test_kelvin_and_celsius_differ_by_273_15(kelvin):
    digits = f"{kelvin:.4f}"
    assert temperature_c(f"{digits} K") == pytest.approx(float(digits) - 273.15, abs=1e-9)


def test_messages_name_what_was_typed():
    assert re.search("“12,345 mL”", refusal(volume_ml, "12,345 mL"))
