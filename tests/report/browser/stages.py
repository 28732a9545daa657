"""The stages whose reviews are opened: every demo stage, and one of many positions."""

from tests.command.running import ROOT

DEMO = sorted(path.stem for path in (ROOT / "rulecheck" / "demo_data").glob("*.cir"))


def many_legs(count: int) -> tuple[str, str]:
    """Netlist and sheet of `count` legs between one bank and one bus: two positions each."""
    cards = ["* bank to bus by many legs", "C1 BAT 0 470u voltage=80", "C2 BUS 0 470u voltage=160"]
    for k in range(1, count + 1):
        cards += [
            f"L{k} BAT SW{k} 33u current=20",
            f"M{2 * k - 1} BUS GH{k} SW{k} SW{k} FET blocking=200 current=20",
            f"M{2 * k} SW{k} GL{k} 0 0 FET blocking=200 current=20",
        ]
    cards += [".model FET NMOS", ".end"]
    sheet = (
        "ports:\n"
        f"  bank: {{between: [BAT, 0], voltage: [42 V, 58 V], supplies: [{-8 * count} A, "
        f"{8 * count} A]}}\n"
        "  bus: {between: [BUS, 0], voltage: [90 V, 120 V]}\n"
        "switching: {frequency: 50 kHz, dead-time: 300 ns, edge: 20 ns}\n"
    )
    return "\n".join(cards) + "\n", sheet
