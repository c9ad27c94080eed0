"""lowindex catalog: the shipped groups and families with their sources."""

from __future__ import annotations

import argparse
import json
from typing import TYPE_CHECKING, Any

from lowindex.cli.console import show
from lowindex.errors import InputError

if TYPE_CHECKING:
    from lowindex.known import Entry

EXAMPLE = """examples:
  lowindex catalog --kind "plane group"
  lowindex catalog p6m
  lowindex hunt p6m

marks: L seen in print, M from memory, C computed"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "catalog",
        help="list the shipped groups and families, or show one with its sources",
        description="Lists groups and families with what is known of them; every command takes their names.",
        epilog=EXAMPLE,
    )
    parser.add_argument("name", nargs="?", metavar="NAME", help="show this entry")
    parser.add_argument("--kind", metavar="KIND", help="list only entries whose kind contains this text")
    parser.add_argument("--json", action="store_true", help="one JSON object an entry")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """List or show; the exit code."""
    from lowindex.known import entries, entry

    if arguments.name is not None:
        found = entry(arguments.name)
        if found is None:
            wanted = arguments.name.casefold()
            near = [name for name in entries() if wanted in name.casefold()][:6]
            hint = f"; there are {', '.join(near)}" if near else "; lowindex catalog lists all names"
            raise InputError(f"the catalog has no entry {arguments.name[:60]!r}{hint}")
        show(json.dumps(_object(found), ensure_ascii=False) if arguments.json else _page(found))
        return 0
    wanted = (arguments.kind or "").casefold()
    chosen = [item for item in entries().values() if wanted in item.kind.casefold()]
    if not chosen:
        kinds = ", ".join(dict.fromkeys(item.kind for item in entries().values()))
        raise InputError(f"no entry is of the kind {arguments.kind!r}; kinds: {kinds}")
    width = max(len(item.name) for item in chosen)
    for item in chosen:
        show(json.dumps(_object(item), ensure_ascii=False) if arguments.json else f"{item.name.ljust(width)}  {item.title}")
    return 0


def _object(item: Entry) -> dict[str, Any]:
    facts = [{"what": fact.what, "value": fact.value, "mark": fact.mark, "source": str(fact.source)} for fact in item.facts]
    head = {"name": item.name, "title": item.title, "kind": item.kind, "family" if item.is_family else "presentation": item.text}
    return head | {"source": str(item.source), "note": item.note or None, "facts": facts}


def _page(item: Entry) -> str:
    lines = [f"{item.name}: {item.title}", f"  {item.kind}", f"  {item.text}", f"  source: {item.source}"]
    if item.note:
        lines.append(f"  {item.note}")
    for fact in item.facts:
        value = ", ".join(map(str, fact.value)) if isinstance(fact.value, list) else str(fact.value)
        lines.append(f"  {fact.what.replace('_', ' ')}: {value}  [{fact.mark}: {fact.source.key}]")
    return "\n".join(lines)
