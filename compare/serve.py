"""Starts the page on this machine: Streamlit on 127.0.0.1 with the project's settings, from whatever folder."""

from __future__ import annotations

import gc
import inspect
import socket
import sys
import threading
import tomllib
from collections.abc import Iterator, Sequence
from importlib import import_module
from pathlib import Path
from typing import Any

HOST = "127.0.0.1"
SCRIPT = Path(__file__).with_name("page.py")
SETTINGS = Path(__file__).with_name("page.toml")
STARTED, WRONG_CALL = 0, 2
DRAWN_WITH = ("page_sheets", "page_circuit", "page_choose", "page_review", "page_substitute", "page_work")
"""The modules of the views; what they import in turn is the most part of the page's start."""
LATER = ("pandas", "pyarrow")
"""For tables: the first view of all shows none."""


def serve(sheets: Sequence[str], *, bench: str | None = None, port: int = 8733) -> int:
    """Run the page until it is stopped; 0 then, 2 when the port cannot be had.

    The settings go in as values and not as a file, so that no folder's own configuration can open the page to the
    network or turn statistics on.
    """
    fault = port_fault(port)
    if "-" in sheets:
        fault = "-: the page reads no standard input; name files, or paste the text on the page"
    if fault is not None:
        print(f"quartzfolio: {fault}", file=sys.stderr)  # noqa: T201
        return WRONG_CALL
    # Thousands of classes are made now and none of them goes: searching for garbage among them is lost time.
    gc.disable()
    from streamlit import config
    from streamlit.web import bootstrap

    config._main_script_path = str(SCRIPT)
    flags = settings(port)
    bootstrap.load_config_options(flags)
    threading.Thread(target=load, name="loading the views", daemon=True).start()
    bootstrap.run(str(SCRIPT), False, script_arguments(sheets, bench), flags)
    return STARTED


def load() -> None:
    """Import what the views need while the browser is still busy with Streamlit's own files.

    Nothing of it ever becomes garbage: frozen, it is passed over by the collection that Streamlit does after each run.
    """
    try:
        # Streamlit draws the icon with PIL.
        for name in (*(f"compare.{one}" for one in DRAWN_WITH), "PIL.Image"):
            import_module(name)
        # With the first element Streamlit asks from where it was called; `inspect` then looks at each module's file,
        # of which it remembers those that it has seen.
        inspect.getmodule(inspect.currentframe())
        for name in LATER:
            import_module(name)
        inspect.getmodule(inspect.currentframe())
    finally:
        gc.freeze()
        gc.enable()


def settings(port: int) -> dict[str, Any]:
    """Streamlit's options by their flag names (`server_port`), from page.toml and the port."""
    return {**dict(_flat(tomllib.loads(SETTINGS.read_text(encoding="utf-8")))), "server_port": port}


def script_arguments(sheets: Sequence[str], bench: str | None) -> list[str]:
    """What page.py finds in `sys.argv`: the bench first, then the sheets, whatever their names begin with."""
    return [*(["--bench", bench] if bench is not None else []), "--", *sheets]


def read_script_arguments(arguments: Sequence[str]) -> tuple[str | None, list[str]]:
    """The bench and the sheets out of `script_arguments`; none of either where the script was started without."""
    if "--" not in arguments:
        return None, []
    at = list(arguments).index("--")
    return (arguments[1] if arguments[0] == "--bench" else None), list(arguments[at + 1 :])


def port_fault(port: int) -> str | None:
    """Say in one sentence why the page cannot be served at `port`; None when it can."""
    if not 1 <= port <= 65535:
        return f"--port {port}: a port is a number from 1 to 65535"
    with socket.socket() as probe:
        probe.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
        try:
            probe.bind((HOST, port))
        except OSError as fault:
            reason = (fault.strerror or str(fault)).lower()
            return f"--port {port}: cannot be had on {HOST} ({reason}); give another with --port"
    return None


def _flat(table: dict[str, Any], above: str = "") -> Iterator[tuple[str, Any]]:
    for key, value in table.items():
        if isinstance(value, dict):
            yield from _flat(value, f"{above}{key}_")
        else:
            yield f"{above}{key}", value
