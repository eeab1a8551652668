"""Quantities as they are shown, and read back."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.quantities import (
    amount_mmol,
    density_g_per_ml,
    duration_min,
    fraction,
    mass_mg,
    molarity_mol_per_l,
    temperature_c,
    volume_ml,
)
from reactions.chemistry.quantity_text import (
    EXACT,
    format_amount,
    format_density,
    format_duration,
    format_fraction,
    format_mass,
    format_molarity,
    format_temperature,
    format_volume,
)

PAIRS = [
    (format_mass, mass_mg),
    (format_volume, volume_ml),
    (format_amount, amount_mmol),
    (format_molarity, molarity_mol_per_l),
    (format_density, density_g_per_ml),
    (format_duration, duration_min),
    (format_temperature, temperature_c),
]


@pytest.mark.parametrize(
    ("mass", "shown"),
    [
        (0.0, "0 mg"),
        (0.05, "50 µg"),
        (0.5, "0.5 mg"),
        (124.7596, "124.8 mg"),
        (0.1, "0.1 mg"),
        (999.0, "999 mg"),
        (1000.0, "1 g"),
        (1250.0, "1.25 g"),
        (2_000_000.0, "2 kg"),
        (1e-9, "0.000001 µg"),
    ],
)
def test_masses_are_shown_in_the_unit_of_the_balance(mass, shown):
    assert format_mass(mass) == shown


@pytest.mark.parametrize(
    ("volume", "shown"),
    [
        (0.0, "0 mL"),
        (0.0176, "17.6 µL"),
        (0.09, "90 µL"),
        (0.1, "0.1 mL"),
        (220.98214, "221 mL"),
        (1000.0, "1 L"),
        (1500.0, "1.5 L"),
    ],
)
def test_volumes_are_shown_in_the_unit_of_the_glass(volume, shown):
    assert format_volume(volume) == shown


@pytest.mark.parametrize(
    ("minutes", "shown"),
    [
        (0.0, "0 min"),
        (45.0, "45 min"),
        (90.0, "90 min"),
        (120.0, "2 h"),
        (250.0, "4 h 10 min"),
        (1000.0, "16 h 40 min"),
        (4320.0, "3 d"),
        (4325.0, "3 d 5 min"),
        (12345.0, "8 d 13 h 45 min"),
        (179.9999999, "3 h"),
        (1 / 3, "20 s"),
        (0.01, "0.6 s"),
        (1.5, "1 min 30 s"),
        (100 / 60, "1 min 40 s"),
        (14400.0 + 1 / 6, "10 d 10 s"),
    ],
)
def test_times_are_shown_as_people_say_them(minutes, shown):
    assert format_duration(minutes) == shown


@pytest.mark.parametrize(
    ("amount", "shown"),
    [
        (0.0, "0 mmol"),
        (0.09, "90 µmol"),
        (0.1, "0.1 mmol"),
        (999.0, "999 mmol"),
        (1000.0, "1 mol"),
    ],
)
def test_amounts_of_substance_are_shown_in_their_unit(amount, shown):
    assert format_amount(amount) == shown


def test_a_time_of_minutes_keeps_its_seconds_and_one_below_a_minute_its_figures():
    assert format_duration(1.0) == "1 min"
    assert format_duration(2 + 1.2345 / 60) == "2 min 1.2345 s"
    assert format_duration(1.23456 / 60) == "1.235 s"


def test_signs_and_shares():
    assert format_temperature(0.0) == "0 °C"
    assert format_temperature(-78.0) == "−78 °C"
    assert format_fraction(0.973) == "97.3 %"
    assert format_amount(0.0138) == "13.8 µmol"


@given(st.sampled_from(PAIRS), st.floats(1e-6, 1e7, allow_nan=False))
def test_what_is_shown_reads_back_to_the_figures_shown(pair, value):
    shown, read = pair
    assert read(shown(value)) == pytest.approx(value, rel=5.1e-4)


@given(
    st.sampled_from(PAIRS),
    st.decimals(min_value=0, max_value=10**6, places=5, allow_nan=False).map(float),
)
def test_what_a_person_typed_reads_back_exactly_at_full_figures(pair, value):
    shown, read = pair
    assert read(shown(value, EXACT)) == value


@given(st.integers(0, 10**7))
def test_seconds_read_back_exactly(seconds):
    minutes = duration_min(f"{seconds} s")

    assert duration_min(format_duration(minutes, EXACT)) == minutes
    assert duration_min(format_duration(minutes)) == minutes


@given(st.decimals(min_value=0, max_value=1, places=6, allow_nan=False).map(float))
def test_shares_read_back_exactly_at_full_figures(share):
    assert fraction(format_fraction(share, EXACT)) == share


@given(st.decimals(min_value="-273.15", max_value=3000, places=4, allow_nan=False).map(float))
def test_temperatures_below_zero_read_back_too(temperature):
    assert temperature_c(format_temperature(temperature, EXACT)) == temperature
