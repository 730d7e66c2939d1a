"""How the page is started: settings, arguments and the port."""

import socket
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
