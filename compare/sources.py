"""Where the inputs of a reckoning come from, in words: the crystal's C1 and C0, ageing, the transconductance."""

from __future__ import annotations

from functools import lru_cache

from compare.bench import Bench
from compare.budget import ageing_factor
from compare.columns import DISAGREES, ESTIMATED, HIGH, LOW, MID, SHUNT_FROM, Columns
from compare.explain import FIELD_WORDS, ends_text, figure, reading_text
from compare.motional import estimate_first_year_ageing_ppm
from compare.offer import C1_ROUTES, Offer


def ageing_words(offer: Offer, bench: Bench) -> str:
    """The ageing reading, the factor used, and what the other rule would have given."""
    asked, stated = bench.requirement, offer.ageing_years
    factors = _ageing_factors(stated, asked.years)
    other = "linear" if asked.ageing_rule == "logarithm" else "logarithm"
    source = reading_text("ageing_ppm", offer.ageing)
    if not offer.ageing.stated:
        source = f"ageing not stated, estimated {estimate_first_year_ageing_ppm().basis}"
    return (
        f"{source} after {_years(stated)}, times {factors[asked.ageing_rule]:.3g} for {_years(asked.years)} by the "
        f"{asked.ageing_rule} rule (by the {other} rule {factors[other]:.3g})"
    )


@lru_cache(maxsize=64)
def _ageing_factors(stated_years: float, asked_years: float) -> dict[str, float]:
    return {rule: float(ageing_factor(rule, stated_years, asked_years)) for rule in ("logarithm", "linear")}


def _years(count: float) -> str:
    return f"{count:g} year" if count == 1 else f"{count:g} years"


def c1_words(columns: Columns, at: int) -> str:
    """Where C1 comes from: a reading, a reading turned, or an estimate with what it rests on."""
    route, offer = int(columns.route[at]), columns.offers[at]
    span = columns.motional_ff[:, :, at]
    value = ends_text((span[:, LOW].min(), span[0, MID], span[:, HIGH].max()), "fF")
    if route == ESTIMATED:
        return f"C1 {value} estimated ({columns.motional_basis[at]})"
    field = C1_ROUTES[route]
    source = reading_text(field, offer.at[0].motional[field])
    formula = {
        "motional_inductance_mh": "1/(ω² L1 - 1/(C0 + CL))",
        "capacitance_ratio": "C0/(C0/C1)",
        "pulling_sensitivity_ppm_per_pf": "2 S Ct²/(1 - 2 S Ct), Ct = C0 + CL",
        "quality_factor": "1/(ωs Q R1)",
    }.get(field)
    return source if formula is None else f"C1 {value} = {formula} from {source}"


def c0_words(columns: Columns, at: int) -> str:
    """Where C0 comes from; a limit alone is said to be one, with the estimate of its low end."""
    taken = columns.offers[at].at[0].shunt_capacitance
    if columns.shunt_missing[at]:
        value = ends_text([float(end) for end in columns.shunt_pf[0, :, at]], "pF")
        return f"C0 {value} estimated ({columns.shunt_basis[at]})"
    if columns.shunt_derived[at]:
        value = ends_text([float(end) for end in columns.shunt_pf[0, :, at]], "pF")
        sources = [reading_text(name, columns.offers[at].at[0].motional[name]) for name in SHUNT_FROM]
        return f"C0 {value} = C1 (C0/C1) from {' and '.join(sources)}"
    text = reading_text("shunt_capacitance_pf", taken)
    if columns.shunt_loose[at]:
        floor = figure(float(columns.shunt_floor_pf[at]))
        return f"{text}, its low end for frequency estimated {floor} pF ({columns.shunt_basis[at]})"
    return f"{text}, typical alone, used as it stands" if taken.typical_only else text


def remarks(columns: Columns, at: int) -> list[dict[str, str]]:
    """Every rule that was used in taking the readings, and stated values that do not agree."""
    offer = columns.offers[at]
    said = [{"about": about, "message": text} for about, text in offer.said]
    said += [{"about": name, "message": text} for name, taken in offer.taken().items() for text in taken.said]
    by_route, route = columns.other_routes_ff[:, at], int(columns.route[at])
    if route == ESTIMATED:
        return said
    for other, value in enumerate(by_route):
        apart = abs(float(value) / float(columns.motional_ff[0, MID, at]) - 1)
        if other != route and apart > DISAGREES:
            name = FIELD_WORDS.get(C1_ROUTES[other], C1_ROUTES[other])
            text = (
                f"C1 from {name} would be {figure(float(value))} fF, {apart:.0%} from the one used: look at the sheet"
            )
            said.append({"about": C1_ROUTES[other], "message": text})
    return said
