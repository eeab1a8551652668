"""Bringing a spreadsheet in by the pages: what is asked, kept, refused and shown."""

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse

from reactions.models import HistoryImport, ImportState

pytestmark = pytest.mark.django_db

# Invented rows.
CSV = "title,family,C60 mass / mg,solvent\nRun one,bingel,100,toluene\nRun two,bingel,90,toluene\n"


@pytest.fixture
def upload(client):
    def send(user, content=CSV, name="book.csv", campaign="ACC"):
        client.force_login(user)
        file = SimpleUploadedFile(name, content.encode() if isinstance(content, str) else content)
        return client.post(reverse("reactions:history"), {"campaign": campaign, "file": file})

    return send


@pytest.fixture
def uploaded(upload, author, campaign):
    upload(author)
    return HistoryImport.objects.get()


def page_of(job):
    return reverse("reactions:history-import", args=[job.pk])


def test_an_upload_leads_to_its_columns(client, upload, author, campaign):
    answer = upload(author)
    page = client.get(answer["Location"]).content.decode()
    assert "What the columns hold" in page
    assert '<option value="C60 mass / mg" selected>' in page
    assert "Run one" in page


@pytest.mark.parametrize(
    ("content", "words"),
    [("", "empty"), (b"PK\x03\x04\x00\xff", "UTF-8"), ("a,a\n1,2\n", "rename one")],
)
def test_what_is_no_table_is_refused_at_the_field(upload, author, campaign, content, words):
    page = upload(author, content).content.decode()
    assert words in page
    assert 'aria-invalid="true"' in page
    assert not HistoryImport.objects.exists()


def test_what_was_chosen_stays_when_something_is_missing(client, uploaded, author):
    typed = {"family-value": "bingel", "solvent-column": "solvent", "title-value": "my runs"}
    answer = client.post(page_of(uploaded), typed)
    page = answer.content.decode()
    assert answer.status_code == 200
    assert "Say which column holds the mass of cage" in page
    assert 'value="my runs"' in page
    uploaded.refresh_from_db()
    assert uploaded.state == ImportState.UPLOADED


def test_cells_headers_and_file_names_are_shown_as_text(client, upload, author, campaign):
    evil = "<script>alert(1)</script>"
    upload(author, f"{evil},family\n{evil},bingel\n", name=f"{evil}.csv")
    page = client.get(page_of(HistoryImport.objects.get())).content.decode()
    assert evil not in page
    assert "&lt;script&gt;" in page


def test_a_reader_sees_it_and_confirms_nothing(client, uploaded, reader):
    client.force_login(reader)
    assert "What the columns hold" not in client.get(page_of(uploaded)).content.decode()
    assert client.post(page_of(uploaded), {}).status_code == 403


def test_another_campaigns_import_is_not_there(client, uploaded, outsider):
    client.force_login(outsider)
    assert client.get(page_of(uploaded)).status_code == 404
    assert "book.csv" not in client.get(reverse("reactions:history")).content.decode()


def test_nobody_uploads_into_a_campaign_they_only_read(upload, reader):
    assert upload(reader).status_code == 200
    assert not HistoryImport.objects.exists()


def test_bad_rows_are_listed_with_their_reasons(client, uploaded):
    HistoryImport.objects.update(
        state=ImportState.REFUSED, problems=[{"row": 3, "reason": "mass of cage: <b>empty</b>"}]
    )
    page = client.get(page_of(uploaded)).content.decode()
    assert "mass of cage: &lt;b&gt;empty&lt;/b&gt;" in page
    assert "What the columns hold" in page


def test_progress_is_asked_for_until_it_ends(client, uploaded):
    HistoryImport.objects.update(state=ImportState.RUNNING, rows_done=1)
    enhanced = {"headers": {"HX-Request": "true"}}
    watching = client.get(page_of(uploaded), **enhanced)
    assert "1 of 2 rows checked" in watching.content.decode()
    assert "every 1s" in watching.content.decode()
    assert "HX-Refresh" not in watching
    HistoryImport.objects.update(state=ImportState.DONE)
    assert client.get(page_of(uploaded), **enhanced)["HX-Refresh"] == "true"


def test_a_cancel_is_asked_for_once(client, uploaded):
    HistoryImport.objects.update(state=ImportState.RUNNING)
    client.post(reverse("reactions:history-cancel", args=[uploaded.pk]))
    uploaded.refresh_from_db()
    assert uploaded.is_cancel_requested
    assert "Stopping" in client.get(page_of(uploaded)).content.decode()
