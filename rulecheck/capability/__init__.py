"""What each position can do: directed reach, shortest path, maximum flow."""

from rulecheck.capability.capabilities import Capabilities, Capability, Direction

__all__ = ["Capabilities", "Capability", "Direction"]
