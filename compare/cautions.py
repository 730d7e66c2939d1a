"""The cautions that stand beside every verdict, on the page and in the terminal alike."""

CAUTIONS = (
    "An estimate is no measurement, and a computed margin is no proof: prove it on the real board, over temperature "
    "and supply, with the series resistor at which oscillation stops. Samples that start are no proof either.",
    "Typical transconductance is not the least; ESR here is R1 unless the bench says otherwise.",
    "Drive-level dependence, spurious modes, layout, leakage and supply noise are not in this reckoning.",
    "Overdrive ages a crystal and can break it: measure the drive, do not only compute it.",
    "Safety-related, medical, automotive or aviation use needs qualified people, the standards that apply and the "
    "maker's word.",
)
