"""Potentials of nets relative to each other, as affine forms: a union-find with differences."""

from rulecheck.values import AffineForm


class Offsets:
    """Ties nets by known differences; answers the difference of any two that hang together.

    Its state is the forest of ties; paths are shortened as they are walked.
    """

    def __init__(self) -> None:
        self._parent: dict[str, str] = {}
        self._over_parent: dict[str, AffineForm] = {}

    def root(self, net: str) -> str:
        return self._find(net)[0]

    def offset(self, net: str) -> AffineForm:
        """The net's potential over that of its root."""
        return self._find(net)[1]

    def difference(self, first: str, second: str) -> AffineForm | None:
        """The voltage of first over second; None where nothing ties them."""
        if first == second:
            return AffineForm()
        first_root, first_offset = self._find(first)
        second_root, second_offset = self._find(second)
        return first_offset - second_offset if first_root == second_root else None

    def tie(self, first: str, second: str, voltage: AffineForm) -> None:
        """Let first lie `voltage` over second; ignored where they are tied already."""
        first_root, first_offset = self._find(first)
        second_root, second_offset = self._find(second)
        if first_root != second_root:
            self._parent[first_root] = second_root
            self._over_parent[first_root] = voltage + second_offset - first_offset

    def _find(self, net: str) -> tuple[str, AffineForm]:
        path: list[str] = []
        while net in self._parent:
            path.append(net)
            net = self._parent[net]
        total = AffineForm()
        for step in reversed(path):
            total = self._over_parent[step] + total
            self._parent[step] = net
            self._over_parent[step] = total
        return net, total
