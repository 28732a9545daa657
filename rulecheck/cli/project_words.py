"""What each key of a project file means, with an example of its value."""

from rulecheck.reading.keys import Word

PROJECT_WORDS = {
    "netlists": Word("What `rulecheck lint` checks; patterns such as `*.cir` too.", '["*.cir"]'),
    "sheets": Word(
        "The stage sheet of a netlist, where it does not stand beside it.",
        "{pump.cir: winter.stage.yaml}",
    ),
    "parts": Word("Files of part data for all netlists.", "[hut.parts.yaml]"),
    "packs": Word(
        "Packs of rules beside the shipped ones: files, or profiles that travel along.",
        "[derating/plain-80-percent, hut.rules.yaml]",
    ),
    "include-dirs": Word("Folders below this one that netlists may include from.", "[models]"),
    "deviations": Word("Broken rules that somebody accepted."),
    "deviations.*.rule": Word("The id of the rule.", "blocking-rating"),
    "deviations.*.subject": Word(
        "The name of what it is accepted on, or a pattern with `*` and `?`.", "Q7"
    ),
    "deviations.*.reason": Word("Why it is accepted.", "lent until the spares arrive"),
    "deviations.*.accepted-by": Word("Who accepted it.", "head of power"),
    "deviations.*.until": Word("The last day on which it holds; for ever without.", "2027-06-30"),
    "deviations.*.netlist": Word("The netlist, or a pattern; all of them without.", "hut.cir"),
    "fail-at": Word("The lowest level of a finding that fails the run.", "warning"),
    "undecided": Word("Whether a check that waits for data fails the run.", "fail"),
}
