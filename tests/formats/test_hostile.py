"""Files that are no files of ours: each is refused with one line that names the file."""

from __future__ import annotations

from pathlib import Path

import pytest

from netsketch.formats import FormatError, limits, read

BOMB = b"""<?xml version="1.0"?><!DOCTYPE lolz [<!ENTITY a "aaaaaaaaaa">
<!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;">]><graphml>&b;</graphml>"""
EXTERNAL = b"""<!DOCTYPE g [<!ENTITY x SYSTEM "file:///etc/hostname">]><graphml>&x;</graphml>"""
GRAPHML = b'<graphml xmlns="http://graphml.graphdrawing.org/xmlns">%s</graphml>'
HEAD = b'{"format": "netsketch", "version": 1, '

CASES = {
    "empty.json": (b"", "empty"),
    "blank.json": (b" \n ", "empty"),
    "truncated.json": (HEAD + b'"nodes": [', "line 1: ends too early"),
    "cut.json": (HEAD + b'"no', "line 1, column"),
    "trailing.json": (HEAD + b'"nodes": [], "edges": []} x', "line 1, column"),
    "comma.json": (b'{"a": 1,}', "line 1, column"),
    "utf16.json": ("{}".encode("utf-16"), "UTF-16"),
    "latin1.json": (b'{"a": 1,\n "b": "caf\xe9"}', "line 2: not UTF-8"),
    "binary.json": (bytes(range(256)), "not UTF-8"),
    "list.json": (b"[1, 2]", "neither"),
    "number.json": (b"5", "neither"),
    "repeated.json": (HEAD + b'"nodes": [{"id": "a", "id": "b"}]}', "“id” stands twice"),
    "deep.json": (b"[" * 200_000, "nested"),
    "huge-number.json": (b'{"a": ' + b"9" * 5000 + b"}", "digits"),
    "other.json": (b'{"hello": 1}', "neither"),
    "bomb.graphml": (BOMB, "document type or entities"),
    "external.graphml": (EXTERNAL, "document type or entities"),
    "cut.graphml": (b"<graphml><gra", "line 1"),
    "other.graphml": (b"<svg/>", "not GraphML"),
    "none.graphml": (GRAPHML % b"", "not GraphML with one graph"),
    "two.graphml": (GRAPHML % b"<graph/><graph/>", "has 2"),
    "empty.graphml": (b"", "not XML"),
    "binary.graphml": (bytes(range(256)), "not XML"),
    "coding.graphml": (b'<?xml version="1.0" encoding="klingon"?><graphml/>', "encoding"),
    "deep.graphml": (b"<graphml>" + b"<a>" * 5000 + b"</a>" * 5000 + b"</graphml>", "nested"),
    "nameless.graphml": (GRAPHML % b"<graph><node/></graph>", "node 1: has no “id”"),
    "twice.graphml": (GRAPHML % b'<graph><node id="a"/><node id="a"/></graph>', "twice"),
    "nowhere.graphml": (
        GRAPHML % b'<graph><node id="a"/><edge source="a" target="b"/></graph>',
        "edge 1: there is no node “b”",
    ),
    "loop.graphml": (
        GRAPHML % b'<graph><node id="a"/><edge source="a" target="a"/></graph>',
        "itself",
    ),
    "nested.graphml": (GRAPHML % b'<graph><node id="a"><graph/></node></graph>', "nests"),
    "hyper.graphml": (GRAPHML % b"<graph><hyperedge/></graph>", "hyperedges"),
    "keyless.graphml": (GRAPHML % b'<graph><data key="d0">1</data></graph>', "d0"),
    "mixed.graphml": (
        GRAPHML % b'<graph><node id="a"/><node id="b"/><edge source="a" target="b"/>'
        b'<edge source="b" target="a" directed="true"/></graph>',
        "mixes directed and undirected",
    ),
    "empty.gml": (b"", "no graph"),
    "cut.gml": (b"graph [\n node [ id 1", "expected"),
    "binary.gml": (bytes(range(256)), "not UTF-8"),
    "quote.gml": (b'graph [\n node [ id 1 label "a ] ]', "line 3: not GML"),
    "twice.gml": (b"graph [ node [ id 1 ] node [ id 1 ] ]", "duplicated"),
    "nowhere.gml": (b"graph [ node [ id 1 ] edge [ source 1 target 2 ] ]", "undefined target"),
    "loop.gml": (b"graph [ node [ id 1 ] edge [ source 1 target 1 ] ]", "itself"),
    "deep.gml": (b"graph [ " + b"a [ " * 20_000, "nested"),
    "flat.gml": (b"graph 5", "not GML"),
    "nodeless.json": (b'{"nodes": [{"name": "a"}], "links": []}', "nodes[0]: “id” is missing"),
    "odd-id.json": (b'{"nodes": [{"id": [1]}], "links": []}', "nodes[0]: “id” must be"),
    "edgeless.json": (b'{"nodes": []}', "links: there is no such list"),
    "twice.json": (b'{"nodes": [{"id": 1}, {"id": "1"}], "links": []}', "node “1”"),
    "nowhere.json": (
        b'{"nodes": [{"id": "a"}], "links": [{"source": "a", "target": "b"}]}',
        "link from “a” to “b”",
    ),
    "junk.bin": (bytes(range(256)) * 4, "not a file that can be read"),
    "prose.txt": (b"Dear harbour master,\n", "not a file that can be read"),
}


@pytest.mark.parametrize("name", CASES)
def test_a_bad_file_is_refused_in_one_line(tmp_path: Path, name: str) -> None:
    data, said = CASES[name]
    path = tmp_path / name
    path.write_bytes(data)
    with pytest.raises(FormatError) as refused:
        read(path)
    text = str(refused.value)
    assert text.startswith(f"{path}: ")
    assert said in text
    assert text.isprintable()
    assert len(text) < len(str(path)) + 250


def test_what_is_no_file_is_refused(tmp_path: Path) -> None:
    with pytest.raises(FormatError, match="No such file"):
        read(tmp_path / "missing.json")
    with pytest.raises(FormatError, match="a folder"):
        read(tmp_path)
    with pytest.raises(FormatError, match="cannot be read"):
        read(tmp_path / "nul\0.json")


def test_a_file_without_permission_is_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = tmp_path / "locked.json"
    path.write_bytes(b"{}")

    def refuse(*args: object) -> None:
        raise PermissionError(13, "Permission denied", str(path))

    monkeypatch.setattr(Path, "open", refuse)  # who runs as root may read everything
    with pytest.raises(FormatError, match="cannot be read: Permission denied"):
        read(path)


def test_limits_are_held(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    nodes = ", ".join(f'{{"id": "n{i}", "kind": "router"}}' for i in range(6))
    native, foreign = tmp_path / "a.json", tmp_path / "b.json"
    native.write_text(f'{HEAD.decode()}"nodes": [{nodes}], "edges": []}}')
    foreign.write_text(f'{{"nodes": [{nodes}], "links": []}}')
    for path in (native, foreign):
        assert len(read(path).plan.nodes) == 6
    monkeypatch.setattr(limits, "NODES", 5)
    for path in (native, foreign):
        with pytest.raises(FormatError, match="6 nodes; the most is 5"):
            read(path)
    monkeypatch.setattr(limits, "FILE_BYTES", 60)
    with pytest.raises(FormatError, match="larger than"):
        read(native)
