"""What goes wrong on the server is written where its keeper can read it."""

import os
import subprocess
import sys

FAULTY = """
import django
django.setup()
from django.contrib.auth.decorators import login_not_required
from django.http import HttpResponse
from django.test import Client, override_settings
from django.urls import path
import sys
import types

@login_not_required
def fail(request):
    raise RuntimeError("a fault made for the test")

urls = types.ModuleType("urls_of_the_test")
urls.urlpatterns = [path("fail/", fail)]
urls.handler500 = lambda request: HttpResponse(status=500)
sys.modules["urls_of_the_test"] = urls
with override_settings(ROOT_URLCONF="urls_of_the_test"):
    client = Client(raise_request_exception=False, headers={"host": "localhost"})
    print(client.get("/fail/").status_code)
"""


def test_a_fault_leaves_its_trace_on_the_server(tmp_path):
    environment = os.environ | {
        "DJANGO_SETTINGS_MODULE": "labbook.settings",
        "LABBOOK_DATA": str(tmp_path),
        "LABBOOK_DEBUG": "no",
    }
    done = subprocess.run(
        [sys.executable, "-c", FAULTY], env=environment, capture_output=True, text=True, check=False
    )
    assert done.stdout.strip() == "500", done.stderr
    assert "Traceback" in done.stderr
    assert "a fault made for the test" in done.stderr
