"""The order of the steps of a train, and what is wrong with their connections."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass

from gibbsmin.errors import InputError, nearest


@dataclass(frozen=True)
class Node:
    """A step as the graph sees it.

    Attributes
    ----------
    name : str
    inlets : tuple of str
        Streams that it takes.
    recycled : tuple of str
        Those of them that come back from a later step.
    sides : tuple of str
        Names of its side streams.
    """

    name: str
    inlets: tuple[str, ...]
    recycled: tuple[str, ...] = ()
    sides: tuple[str, ...] = ()

    @property
    def outlets(self) -> list[str]:
        """Names of the streams that it gives: its own, and ``NAME.SIDE``."""
        return [self.name, *(f"{self.name}.{side}" for side in self.sides)]


class GraphError(InputError):
    """The connections of a train are wrong; ``step`` and ``key`` say where."""

    def __init__(self, message: str, step: str, key: str = "inlets") -> None:
        self.message, self.step, self.key = message, step, key
        super().__init__(message)


def ordered(nodes: Sequence[Node], feeds: Iterable[str]) -> list[str]:
    """Put the steps into an order in which each comes after those that it takes streams from, recycles apart.

    Parameters
    ----------
    nodes : sequence of Node
        The steps, in any order.
    feeds : iterable of str
        Names of the feeds.

    Returns
    -------
    list of str
        Names of the steps; those that could stand in any order keep that of ``nodes``.

    Raises
    ------
    GraphError
        A stream that does not exist, is taken twice or not at all, a cycle that is not declared, or a declared
        recycle that is none.
    """
    fed = list(feeds)
    source = {stream: node.name for node in nodes for stream in node.outlets}
    _check_names(nodes, fed, source)
    waits = {
        node.name: {source[stream] for stream in node.inlets if stream in source and stream not in node.recycled}
        for node in nodes
    }
    done: list[str] = []
    while len(done) < len(nodes):
        ready = next((node.name for node in nodes if node.name not in done and waits[node.name] <= set(done)), None)
        if ready is None:
            raise _cycle(nodes, waits, done)
        done.append(ready)
    later = _later(nodes, source)
    for node in nodes:
        for stream in node.recycled:
            if source[stream] != node.name and source[stream] not in later[node.name]:
                message = f"{stream} is no recycle: nothing of {node.name} leads to it; list it under inlets"
                raise GraphError(message, node.name, "recycled")
    return done


def _check_names(nodes: Sequence[Node], feeds: Sequence[str], source: Mapping[str, str]) -> None:
    """Refuse names that are used twice, streams that do not exist, and those that two steps take."""
    names = [*feeds, *(node.name for node in nodes)]
    for node in nodes:
        if names.count(node.name) > 1:
            raise GraphError(f"{node.name!r} is the name of two steps, or of a step and a feed", node.name, "name")
    known = [*feeds, *source]
    taken: dict[str, str] = {}
    for node in nodes:
        if not node.inlets:
            raise GraphError("the step takes no stream; name its inlets", node.name)
        for stream in node.inlets:
            key = "recycled" if stream in node.recycled else "inlets"
            if stream not in known:
                message = f"there is no stream {stream!r}{nearest(stream, known)} There are {', '.join(known)}"
                raise GraphError(message, node.name, key)
            if stream in feeds and stream in node.recycled:
                raise GraphError(f"{stream} is a feed; list it under inlets", node.name, key)
            if stream in taken:
                twice = f"{taken[stream]} and {node.name}" if taken[stream] != node.name else f"{node.name} twice"
                raise GraphError(f"{stream} is taken by {twice}; part it by take first", node.name, key)
            taken[stream] = node.name
    left = [feed for feed in feeds if feed not in taken]
    if left:
        raise GraphError(f"no step takes the feed {left[0]}", nodes[0].name)


def _later(nodes: Sequence[Node], source: Mapping[str, str]) -> dict[str, set[str]]:
    """Find the steps that each step's streams reach, recycles apart."""
    after: dict[str, set[str]] = {node.name: set() for node in nodes}
    for node in nodes:
        for stream in node.inlets:
            if stream in source and stream not in node.recycled:
                after[source[stream]].add(node.name)
    found: dict[str, set[str]] = {}
    for name in after:
        seen: set[str] = set()
        open_ends = [name]
        while open_ends:
            for one in after[open_ends.pop()] - seen:
                seen.add(one)
                open_ends.append(one)
        found[name] = seen
    return found


def _cycle(nodes: Sequence[Node], waits: Mapping[str, set[str]], done: Sequence[str]) -> GraphError:
    """Name the steps of a cycle that is not declared."""
    stuck = {node.name: sorted(waits[node.name] - set(done)) for node in nodes if node.name not in done}
    path = [next(iter(stuck))]
    while stuck[path[-1]][0] not in path:
        path.append(stuck[path[-1]][0])
    path = path[path.index(stuck[path[-1]][0]) :]
    loop = " <- ".join([*path, path[0]])
    message = f"the steps go round: {loop}; say which stream comes back by recycled instead of inlets"
    return GraphError(message, path[0])
