"""The API is described by the OpenAPI standard, whole and valid."""

import io
import re

import pytest
import yaml
from django.core.management import call_command
from django.urls import reverse
from drf_spectacular.validation import validate_schema

from reactions.api.urls import urlpatterns
from reactions.calculators import CALCULATORS
from reactions.search.language import SearchQuery

pytestmark = pytest.mark.django_db

AS_JSON = {"Accept": "application/vnd.oai.openapi+json"}


@pytest.fixture
def schema(api):
    return api.get(reverse("reactions:api-schema"), headers=AS_JSON).json()


def test_it_is_valid_and_made_without_a_warning(schema):
    validate_schema(schema)
    made = io.StringIO()
    call_command("spectacular", "--validate", "--fail-on-warn", stdout=made)
    assert yaml.safe_load(made.getvalue())["paths"] == schema["paths"]


def test_it_comes_as_yaml_too(api, schema):
    assert yaml.safe_load(api.get(reverse("reactions:api-schema")).content) == schema


def test_every_address_is_in_it(schema):
    ours = {re.sub(r"<(?:\w+:)?(\w+)>", r"{\1}", str(row.pattern)) for row in urlpatterns}
    described = {path.removeprefix("/api/").replace("{id}", "{pk}") for path in schema["paths"]}
    assert described == ours - {"", "schema/", "compute/{name}/"}


def test_a_search_takes_the_parameters_of_the_page(schema):
    parameters = schema["paths"]["/api/reactions/"]["get"]["parameters"]
    names = {row["name"] for row in parameters}
    assert names == {*SearchQuery.model_fields, "page", "page_size"}


def test_every_change_of_a_part_says_how_to_name_the_version_seen(schema):
    puts = [
        methods["put"]
        for path, methods in schema["paths"].items()
        if "put" in methods and "/reactions/" in path
    ]
    assert len(puts) == 4
    for operation in puts:
        assert {"If-Match", "label"} == {row["name"] for row in operation["parameters"]}
        assert {"409", "428"} <= set(operation["responses"])
        body = operation["requestBody"]["content"]["application/json"]["schema"]["$ref"]
        assert "seen_version" in schema["components"]["schemas"][body.split("/")[-1]]["properties"]


@pytest.mark.parametrize("name", CALCULATORS)
def test_a_calculator_takes_one_request_or_an_array(schema, name):
    operation = schema["paths"][f"/api/compute/{name}/"]["post"]
    body = operation["requestBody"]["content"]["application/json"]["schema"]["$ref"]
    kinds = schema["components"]["schemas"][body.split("/")[-1]]["anyOf"]
    assert "$ref" in kinds[0]
    assert (kinds[1]["type"], kinds[1]["maxItems"]) == ("array", 1000)


def test_the_page_names_every_operation(client, author, schema):
    client.force_login(author)
    page = client.get(reverse("reactions:api-docs")).content.decode()
    for path in schema["paths"]:
        assert path in page
    assert "style=" not in page
