"""What made a result: versions of program, formulas and data contract, printed with everything that goes out."""

from __future__ import annotations

# Raised whenever a number of a review may come out otherwise from the same sheets and bench.
FORMULA_SET = "quartzfolio/formulas/1"


def program_version() -> str:
    """The version installed; "unknown" in a checkout that is not."""
    from importlib.metadata import PackageNotFoundError, version

    try:
        return version("quartzfolio")
    except PackageNotFoundError:
        return "unknown"


def versions_text() -> str:
    """`quartzfolio 0.1.0, quartzfolio/formulas/1, quartzfolio/extract/1, quartzfolio/review/1`."""
    from compare.review import SCHEMA
    from extract.model import SCHEMA as EXTRACT_SCHEMA

    return f"quartzfolio {program_version()}, {FORMULA_SET}, {EXTRACT_SCHEMA}, {SCHEMA}"
