"""What each key of a pack of rules means, with an example of its value."""

from rulecheck.reading.keys import Word

_PARAMETER = {
    "": Word(
        "Figures that conditions name, and that another pack may set.", called="limit.voltage"
    ),
    "*.value": Word("The figure with its unit, or a table of figures by word.", "60 V"),
    "*.meaning": Word("What the figure is.", "largest voltage that may be touched"),
    "*.source": Word("Where the figure comes from.", "common practice"),
}


def _parameters(place: str) -> dict[str, Word]:
    return {f"{place}.{name}" if name else place: word for name, word in _PARAMETER.items()}


PACK_WORDS = {
    "pack": Word("The name of the pack.", "hut"),
    "version": Word("The version of the pack, which reports name.", "2"),
    "about": Word("What the pack is for.", "what can be repaired in winter"),
    **_parameters("parameters"),
    **(
        _parameters("set")
        | {"set": Word("New figures for parameters of earlier packs.", called="derate.blocking")}
    ),
    "rules": Word("The rules of the pack."),
    "rules.*.id": Word(
        "The name of the rule, in small letters with hyphens.", "spare-on-the-shelf"
    ),
    "rules.*.subject": Word("The kind of thing that it judges, each of them.", "part"),
    "rules.*.applies": Word("The condition under which it has something to say.", "power-device"),
    "rules.*.requires": Word("The condition that must hold.", 'model matches "SW-*"'),
    "rules.*.level": Word("How grave it is where it does not hold.", "warning"),
    "rules.*.graver": Word("Another level where a further condition is met."),
    "rules.*.graver.when": Word("The further condition.", "gated"),
    "rules.*.graver.level": Word("The level then.", "error"),
    "rules.*.message": Word(
        "What is reported; a fact in braces is replaced by its value.",
        '"{model} is not on the shelf"',
    ),
    "rules.*.values": Word("Figures that a report carries beside the message.", "{needs: v-max}"),
    "rules.*.why": Word("Why the rule is there.", "Nobody brings parts up in winter."),
    "rules.*.remedy": Word("What to do where it does not hold.", "use an SW transistor"),
    "rules.*.source": Word("The standard, book or practice behind it.", "the hut's spare list"),
    **_parameters("rules.*.parameters"),
    "rules.*.examples": Word("Small stages that test the rule, two at least."),
    "rules.*.examples.*.netlist": Word("The netlist, its title first.", '"* leg\\nR1 a 0 1k"'),
    "rules.*.examples.*.expect": Word(
        "What the rule says of it; `silent` where it does not apply.", "holds"
    ),
    "rules.*.examples.*.of": Word("The one subject that is meant.", "Q1"),
    "rules.*.examples.*.sheet": Word("The stage sheet, as YAML.", '"switching: {edge: 9 ns}"'),
    "rules.*.examples.*.parts": Word("The part data, as YAML.", '"parts: {}"'),
    "rules.*.examples.*.shows": Word("What the example shows.", "a part that is in stock"),
    "change": Word("What the pack changes in rules of earlier packs."),
    "change.*.rule": Word("The id of the rule.", "single-pin-net"),
    "change.*.reason": Word("Why it is changed.", "our exports have test points"),
    "change.*.level": Word("Its new level.", "note"),
    "change.*.off": Word("Whether it is switched off.", "true"),
    **_parameters("change.*.parameters"),
}
