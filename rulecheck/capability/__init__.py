"""What each position can do: directed reach, shortest path, maximum flow."""

from rulecheck.capability.capabilities import Capabilities, Capability, Direction
from rulecheck.capability.find import find_capabilities

__all__ = ["Capabilities", "Capability", "Direction", "find_capabilities"]
