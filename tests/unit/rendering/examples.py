"""Two tables as analyses make them: at direct current, and with complex numbers."""

from equiv.analyses.tables import Column, Measure, Row, Table

DC = Table(
    "Superposition of I:R3",
    ("current in R3, positive from b to gnd inside R3", "DC, two sources, values rms"),
    (
        Column("source", key=True),
        Column("kind"),
        Column("value"),
        Column("coefficient"),
        Column("contribution", "A", family="i"),
        Column("share", "%"),
        Column("running sum", "A", family="i"),
        Column("second method", "A", family="i"),
        Column("relative difference", exponent=True),
    ),
    (
        Row(
            (
                "Vmain",
                "voltage",
                Measure(240.0, "V"),
                Measure(0.026316, "S"),
                6315.84,
                0.6479,
                6315.84,
                6315.84,
                1.2e-16,
            )
        ),
        Row(("standby", "group", None, None, 3432.1, 0.3521, 9747.94, 9747.94, 0.0)),
        Row(
            (
                "Vgen",
                "voltage",
                Measure(236.0, "V"),
                Measure(0.0145, "S"),
                3434.1,
                None,
                None,
                None,
                None,
            ),
            level=1,
        ),
        Row(
            (
                "Iaux",
                "current",
                Measure(-2e-3, "A"),
                Measure(1.0, ""),
                -2.0,
                None,
                None,
                None,
                None,
            ),
            level=1,
        ),
        Row(("sum", "", "", "", 9747.94, 1.0, "", 9747.94, None), total=True),
    ),
    (
        "The sum and the network with all sources on agree to 1.2e-16 of the sum of the "
        "magnitudes (limit 1e-09).",
    ),
)
AC = Table(
    "Voltages",
    columns=(Column("node", key=True), Column("voltage", "V"), Column("source value")),
    rows=(
        Row(("a", 3 + 4j, Measure(120 - 3j, "V"))),
        Row(("名前", -0.001, Measure(1e-9, "ohm"))),
        Row(("x", None, None)),
        Row(("sum", -5 + 0j, Measure(0.0, "V")), total=True),
    ),
)
