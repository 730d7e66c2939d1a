"""Rebuild the PDF, XLSX and DOCX sheets of `sample_specs/`.

The text, Markdown, CSV, TSV and HTML sheets there are written by hand and are their own source, and so are the bench
files and the `.expected.json` beside each sheet: those were read off the finished page and must not be made from the
generator's tables.

    pip install reportlab fpdf2 fonttools openpyxl python-docx pillow
    apt-get install chromium fonts-noto-cjk fonts-liberation fonts-dejavu-core
    python tests/samples/make_sample_specs.py            # all of them, or the file names that follow

Dates inside the files are fixed, so that a rebuild with the same library versions gives the same bytes (Chromium's may
differ with its version).
"""

from __future__ import annotations

import sys
from pathlib import Path

import sample_office
import sample_pdfs

FOLDER = Path(__file__).resolve().parents[2] / "sample_specs"
MAKERS = sample_pdfs.MAKERS | sample_office.MAKERS


def main(names: list[str]) -> None:
    unknown = sorted(set(names) - set(MAKERS))
    if unknown:
        raise SystemExit(f"No sheet is called {', '.join(unknown)}; known are {', '.join(MAKERS)}.")
    for name in names or MAKERS:
        MAKERS[name](FOLDER / name)


if __name__ == "__main__":
    main(sys.argv[1:])
