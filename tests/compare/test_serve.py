"""How the page is started: settings, arguments and the port."""

import socket
import subprocess
import sys
import tomllib
from pathlib import Path

from streamlit import config

from compare.serve import HOST, SETTINGS, port_fault, read_script_arguments, script_arguments, serve, settings

ROOT = Path(__file__).parent.parent.parent


def test_the_settings_of_a_checkout_are_those_that_are_passed():
    checkout = tomllib.loads((ROOT / ".streamlit" / "config.toml").read_text(encoding="utf-8"))
    assert checkout == tomllib.loads(SETTINGS.read_text(encoding="utf-8"))


def test_every_setting_is_one_that_streamlit_knows():
    known = {key.replace(".", "_") for key in config.get_config_options()}
    assert set(settings(8733)) <= known


def test_nothing_leaves_and_nobody_else_comes_in():
    passed = settings(8733)
    assert passed["server_address"] == HOST == "127.0.0.1"
    assert passed["server_port"] == 8733
    assert passed["browser_gatherUsageStats"] is False
    assert passed["client_showErrorLinks"] is False
    assert passed["server_allowedHosts"] == ["127.0.0.1", "localhost"]


def test_sheets_of_any_name_come_through():
    sheets = ["a.pdf", "--bench", "-x", "b c#A-1"]
    assert read_script_arguments(script_arguments(sheets, "my bench.toml")) == ("my bench.toml", sheets)
    assert read_script_arguments(script_arguments(sheets, None)) == (None, sheets)
    assert read_script_arguments(script_arguments([], None)) == (None, [])
    assert read_script_arguments([]) == (None, [])


def test_a_port_that_is_taken_is_told_with_what_to_do():
    with socket.socket() as taken:
        taken.bind((HOST, 0))
        taken.listen()
        port = taken.getsockname()[1]
        assert port_fault(port) == (
            f"--port {port}: cannot be had on 127.0.0.1 (address already in use); give another with --port"
        )
    assert port_fault(port) is None


def test_a_port_out_of_range_is_told():
    assert port_fault(70000) == "--port 70000: a port is a number from 1 to 65535"


def test_standard_input_is_turned_away_with_what_to_do(capsys):
    assert serve(["-"]) == 2
    assert capsys.readouterr().err == (
        "quartzfolio: -: the page reads no standard input; name files, or paste the text on the page\n"
    )


def test_the_views_are_loaded_without_the_tables_that_the_first_one_does_not_show():
    script = (
        "import sys; from compare import serve; "
        "[__import__(f'compare.{name}') for name in serve.DRAWN_WITH]; "
        "print([name for name in ('pandas', 'pdfplumber', 'pypdfium2', 'openpyxl', 'reportlab', 'scipy') "
        "if name in sys.modules])"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


def test_what_is_loaded_is_passed_over_by_the_search_for_garbage():
    script = (
        "import gc; from compare import serve; gc.disable(); serve.load(); print(gc.get_freeze_count(), gc.isenabled())"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    count, enabled = done.stdout.split()
    assert int(count) > 50_000
    assert enabled == "True"
