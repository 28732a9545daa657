"""Disjoint sets that grow together: which names belong to one class."""

from collections.abc import Hashable, Iterable


class Unions:
    """Union-find; only the names given at the start are members, other keys merely join them."""

    def __init__(self, members: Iterable[str]) -> None:
        self._members = tuple(members)
        self._parent: dict[Hashable, Hashable] = {}

    def root(self, key: Hashable) -> Hashable:
        while key in self._parent:
            above = self._parent[key]
            if above in self._parent:
                self._parent[key] = self._parent[above]
            key = above
        return key

    def join(self, first: Hashable, second: Hashable) -> None:
        """The second's class becomes part of the first's."""
        kept, other = self.root(first), self.root(second)
        if kept != other:
            self._parent[other] = kept

    def classes(self) -> list[list[str]]:
        """Members by class, both in the order in which they were given."""
        found: dict[Hashable, list[str]] = {}
        for member in self._members:
            found.setdefault(self.root(member), []).append(member)
        return list(found.values())
