"""What each position can do: directed reach, shortest path, maximum flow."""

from rulecheck.capability.capabilities import Capabilities, Capability, Direction
from rulecheck.capability.find import find_capabilities
from rulecheck.capability.text import capabilities_text

__all__ = ["Capabilities", "Capability", "Direction", "capabilities_text", "find_capabilities"]
