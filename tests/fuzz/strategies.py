"""Inputs that are nearly right: cards, sheets, packs and projects from the words of the trade."""

from hypothesis import strategies as st

NETS = st.sampled_from(["0", "BUS", "SW", "OUT", "G1", "G2", "N", "p", "+12V", "Net-(Q1-G)"])
NUMBERS = st.sampled_from(
    [
        "0",
        "1",
        "10k",
        "4.7u",
        "1e308",
        "-1e-308",
        "1e999",
        "nan",
        "{k}",
        "{f(2)}",
        "2R2",
        "100n",
        "{1/0}",
        "1e30",
        "",
        "58",
    ]
)
CARDS = (
    st.builds("R{} {} {} {}".format, st.integers(0, 9), NETS, NETS, NUMBERS)
    | st.builds("L{} {} {} {}".format, st.integers(0, 9), NETS, NETS, NUMBERS)
    | st.builds("C{} {} {} {}".format, st.integers(0, 9), NETS, NETS, NUMBERS)
    | st.builds("D{} {} {} DX".format, st.integers(0, 9), NETS, NETS)
    | st.builds(
        "M{} {} {} {} {} FET m={}".format, st.integers(0, 9), NETS, NETS, NETS, NETS, NUMBERS
    )
    | st.builds("V{} {} {} {}".format, st.integers(0, 9), NETS, NETS, NUMBERS)
    | st.builds(
        "V{} {} {} PULSE(0 {} 0 1n 1n {} {})".format,
        st.integers(0, 9),
        NETS,
        NETS,
        NUMBERS,
        NUMBERS,
        NUMBERS,
    )
    | st.builds("I{} {} {} SIN(0 {} 50)".format, st.integers(0, 9), NETS, NETS, NUMBERS)
    | st.builds("K{} L{} L{} {}".format, *[st.integers(0, 9)] * 3, NUMBERS)
    | st.builds("X{} {} {} {}".format, st.integers(0, 9), NETS, NETS, st.sampled_from(["A", "B"]))
    | st.builds(".param k={}".format, NUMBERS)
    | st.sampled_from(
        [
            ".subckt A p n",
            ".subckt B p n",
            ".ends",
            ".func f(x) {f(x-1)*k}",
            ".end",
            ".model FET VDMOS(Vds=100)",
            ".model DX D(BV=60)",
            ".include a.inc",
            "+ 5",
        ]
    )
)
NETLISTS = st.lists(CARDS, min_size=1, max_size=25).map(
    lambda rows: "hut\n" + "\n".join(rows) + "\n"
)

VALUES = st.sampled_from(
    [
        "58 V",
        "[42 V, 58 V]",
        "[58 V, 42 V]",
        "-80 A",
        "[0 A, 1e308 A]",
        "1e999 V",
        "20 kHz",
        "230 V rms",
        "x",
        "[]",
        "{}",
        "~",
        "*a",
        "0 V",
        "'\\e[31m'",
    ]
)
KEYS = st.sampled_from(
    [
        "between: [BUS, '0']",
        "between: [OUT, '0']",
        "between: &a [BUS, BUS]",
        "phases: [BUS, SW, OUT]",
    ]
)
PORTS = st.builds(
    "  p{}: {{{}, {}: {}, {}: {}}}".format,
    st.integers(0, 3),
    KEYS,
    st.sampled_from(["voltage", "line-voltage"]),
    VALUES,
    st.sampled_from(["draws", "supplies", "power", "frequency"]),
    VALUES,
)
SETS = st.builds(
    "  {}{}: {{{}: {}}}".format,
    st.sampled_from("LCMR"),
    st.integers(0, 9),
    st.sampled_from(["current", "voltage", "role"]),
    VALUES,
)
SHEETS = st.builds(
    lambda ports, sets, frequency: "\n".join(
        ["ports:", *ports, f"switching: {{frequency: {frequency}}}", "set:", *sets, ""]
    ),
    st.lists(PORTS, min_size=1, max_size=4),
    st.lists(SETS, min_size=1, max_size=4),
    VALUES,
)

RATINGS = st.builds("{{blocking: {}, current: {}}}".format, VALUES, VALUES)
PARTS = st.builds(
    "parts:\n  '{}': {{kind: {}, ratings: {}}}\n".format,
    st.sampled_from(["FET", "*", "D*", "[", "**"]),
    st.sampled_from(["mosfet", "diode", "igbt", "module", "driver", "x"]),
    RATINGS,
)

WORDS = st.sampled_from(
    [
        "gated",
        "blocks-forward",
        "off-voltage",
        "name",
        "needs",
        "devices",
        "d",
        "d.gated",
        "and",
        "or",
        "not",
        "implies",
        "every",
        "some",
        "among",
        "has",
        "in",
        "matches",
        "of",
        "count(",
        "sum(",
        "min(",
        "for",
        "where",
        "lowest(",
        "(",
        ")",
        "[",
        "]",
        ",",
        "<=",
        "=",
        "+",
        "-",
        "*",
        "/",
        "yes",
        "3 V",
        "1e999",
        '"*"',
        ".",
        "__class__",
        "d.__init__",
        "positions",
        "parts",
    ]
)
CONDITIONS = st.lists(WORDS, max_size=14).map(" ".join)
RULES = st.builds(
    "pack: p\nparameters: {{k: {{value: {}, source: s}}}}\nrules:\n  - id: r\n    subject: {}\n"
    "    level: note\n    requires: '{}'\n    message: 'm {{{}}}'\n    why: w\n    remedy: r\n"
    "    source: s\n    examples: []\n".format,
    VALUES,
    st.sampled_from(["position", "part", "net", "leg", "stage", "x"]),
    CONDITIONS,
    CONDITIONS,
)
PROJECTS = st.builds(
    "netlists: [{}]\npacks: [{}]\nparts: [{}]\ninclude-dirs: [{}]\n".format,
    *[
        st.sampled_from(
            [
                "hut.cir",
                "'*.cir'",
                "'**/*'",
                "'[a'",
                "/dev/zero",
                "..",
                ".",
                "hut.rules.yaml",
                "hut.parts.yaml",
                "'\\0'",
                "nowhere",
                "derating/plain-80-percent",
                "''",
                "/etc/*",
            ]
        )
    ]
    * 4,
)
