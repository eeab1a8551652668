import csv
import io

import pytest

from reactions.errors import FieldErrors
from reactions.models import HistoryImport, ImportState, Reaction, Revision, State
from reactions.services.errors import NotAllowed, RecordClosed
from reactions.services.history.importing import (
    confirm_mapping,
    request_cancel,
    run_import,
    upload_history,
)

pytestmark = pytest.mark.django_db

HEADER = [
    "title", "date", "family", "C60 mass / mg", "addend", "reagent", "reagent smiles",
    "equivalents", "reagent mass (mg)", "solvent", "temp / °C", "time / h", "target",
    "x0", "x1", "x2", "product mass / mg",
]  # fmt: skip
# Invented rows.
ROW = [
    "Bingel run", "2024-03-05", "bingel", "100", "*C(*)(C(=O)OCC)C(=O)OCC",
    "diethyl bromomalonate", "CCOC(=O)C(Br)C(=O)OCC", "1.2", "40", "toluene", "25", "2", "1",
    "40 %", "45 %", "15 %", "50",
]  # fmt: skip


def as_csv(*rows, header=HEADER, delimiter=","):
    file = io.StringIO()
    csv.writer(file, delimiter=delimiter).writerows([header, *rows])
    return file.getvalue().encode()


def changed(**cells):
    names = {"mass": 3, "family": 2, "addend": 4, "x1": 14, "date": 1, "time": 11, "smiles": 6}
    row = list(ROW)
    for name, text in cells.items():
        row[names[name]] = text
    return row


@pytest.fixture
def bring_in(author, campaign):
    def bring(content, **mapping):
        job = upload_history(author, campaign, "book.csv", content)
        confirm_mapping(author, job, {**job.column_mapping, **mapping})
        run_import(job.pk)
        job.refresh_from_db()
        return job

    return bring


def test_the_header_suggests_columns_and_units(author, campaign):
    mapping = upload_history(author, campaign, "book.csv", as_csv(ROW)).column_mapping
    assert mapping["cage_mass"]["column"] == "C60 mass / mg"
    assert mapping["cage_mass"]["unit"] == "mg"
    assert (mapping["temperature"]["unit"], mapping["duration"]["unit"]) == ("°C", "h")
    assert mapping["level_1"]["column"] == "x1"


@pytest.mark.parametrize("delimiter", [",", ";", "\t"])
def test_a_good_row_becomes_a_completed_reaction(bring_in, delimiter, author):
    job = bring_in(as_csv(ROW, delimiter=delimiter))
    assert (job.state, job.created_count, job.problems) == (ImportState.DONE, 1, [])
    reaction = Reaction.objects.get()
    assert (reaction.state, reaction.family_key, reaction.number) == (State.COMPLETED, "bingel", 1)
    assert (reaction.temperature_c, reaction.duration_min) == (25, 120)
    assert reaction.found_composition == pytest.approx([0.4, 0.45, 0.15])
    cage, reagent = reaction.components.all()
    assert cage.actual_mmol == pytest.approx(100 / 720.66, rel=1e-4)
    # Derived: 40 mg of 239.065 g/mol on that cage.
    assert reagent.actual_equivalents == pytest.approx(40 / 239.065 / (100 / 720.66), rel=1e-4)
    assert reaction.yield_on_charged == pytest.approx(50 / 878.813 / (100 / 720.66), rel=1e-4)
    assert Revision.objects.get().action == "brought in from book.csv, row 2"


@pytest.mark.parametrize(
    ("cells", "words"),
    [
        ({"mass": "a pinch"}, "a pinch"),
        ({"mass": ""}, "mass of cage"),
        ({"mass": "-5"}, "below 0"),
        ({"family": "bingle"}, "bingle"),
        ({"addend": "C(C"}, "addend"),
        ({"smiles": "CC(("}, "reagent smiles"),
        ({"x1": "85 %"}, "140.0 %"),
        ({"date": "soon"}, "soon"),
        ({"time": "overnight"}, "overnight"),
    ],
)
def test_one_bad_row_is_named_and_nothing_is_stored(bring_in, cells, words):
    job = bring_in(as_csv(ROW, changed(**cells), ROW))
    assert job.state == ImportState.REFUSED
    assert [problem["row"] for problem in job.problems] == [3]
    assert words in job.problems[0]["reason"]
    assert not Reaction.objects.exists()


def test_every_bad_row_is_reported(bring_in):
    job = bring_in(as_csv(*[changed(mass="?") if at % 2 else ROW for at in range(10)]))
    assert [problem["row"] for problem in job.problems] == [3, 5, 7, 9, 11]


def test_a_bare_number_without_a_unit_is_not_guessed(bring_in):
    job = bring_in(as_csv(ROW), cage_mass={"column": "C60 mass / mg", "unit": ""})
    assert "no unit" in job.problems[0]["reason"]


def test_a_cells_own_unit_goes_before_the_columns(bring_in):
    bring_in(as_csv(changed(mass="0.2 g")))
    assert Reaction.objects.get().components.first().actual_mass_mg == pytest.approx(200)


def test_one_value_serves_all_rows(bring_in):
    header = [name for name in HEADER if name != "family"]
    row = [cell for name, cell in zip(HEADER, ROW, strict=True) if name != "family"]
    job = bring_in(as_csv(row, header=header), family={"value": "bingel"})
    assert (job.state, Reaction.objects.get().family_key) == (ImportState.DONE, "bingel")


def test_a_field_that_is_needed_must_be_mapped(author, campaign):
    job = upload_history(author, campaign, "book.csv", as_csv(ROW))
    mapping = {**job.column_mapping}
    del mapping["cage_mass"]
    with pytest.raises(FieldErrors) as caught:
        confirm_mapping(author, job, mapping)
    assert list(caught.value.messages) == ["cage_mass"]


def test_a_column_that_is_not_there_is_refused(author, campaign):
    job = upload_history(author, campaign, "book.csv", as_csv(ROW))
    with pytest.raises(FieldErrors, match="no column"):
        confirm_mapping(author, job, {**job.column_mapping, "solvent": {"column": "liquor"}})


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"", "column names"),
        (b"title,mass\n", "no row"),
        (b"a,a\n1,2\n", "rename one"),
        (b"\xff\xfe\x00", "UTF-8"),
        (b"a,b\x00\n1,2\n", "not text"),
        (b"a,b\n" + b"1,2\n" * 50_001, "split them"),
        (b"x" * (8 * 2**20 + 1), "split it"),
    ],
)
def test_a_file_that_is_no_table_is_refused_with_the_remedy(author, campaign, content, words):
    with pytest.raises(FieldErrors, match=words):
        upload_history(author, campaign, "book.csv", content)
    assert not HistoryImport.objects.exists()


def test_a_cancelled_import_stores_nothing(author, campaign):
    job = upload_history(author, campaign, "book.csv", as_csv(*[ROW] * 500))
    confirm_mapping(author, job, job.column_mapping)
    request_cancel(author, job)
    run_import(job.pk)
    job.refresh_from_db()
    assert job.state == ImportState.CANCELLED
    assert not Reaction.objects.exists()


def test_a_task_delivered_twice_imports_once(bring_in):
    job = bring_in(as_csv(ROW))
    run_import(job.pk)
    assert Reaction.objects.count() == 1


def test_an_import_that_is_done_is_not_confirmed_again(author, bring_in):
    job = bring_in(as_csv(ROW))
    with pytest.raises(RecordClosed):
        confirm_mapping(author, job, job.column_mapping)


def test_only_an_author_brings_a_history_in(reader, campaign):
    with pytest.raises(NotAllowed):
        upload_history(reader, campaign, "book.csv", as_csv(ROW))


def test_numbers_go_on_from_those_in_the_book(bring_in):
    bring_in(as_csv(ROW, ROW))
    bring_in(as_csv(ROW))
    assert sorted(Reaction.objects.values_list("number", flat=True)) == [1, 2, 3]


def test_ten_thousand_rows_come_in_whole(bring_in):
    job = bring_in(as_csv(*[ROW] * 10_000))
    assert (job.state, job.created_count, job.rows_done) == (ImportState.DONE, 10_000, 10_000)
    assert Reaction.objects.count() == 10_000
    assert Revision.objects.count() == 10_000
