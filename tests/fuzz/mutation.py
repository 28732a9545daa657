"""Damage to the bytes of a file: flips, cuts, splices and repetitions, as hypothesis draws them."""

from hypothesis import strategies as st

LONGEST = 20_000
SIGNS = [
    b"\x00",
    b"\xff\xfe",
    b"\xef\xbb\xbf",
    b"\x1a",
    b"\r",
    b"\t",
    b"\xc2\xa0",
    b"\xb5",
    b"\x1b[31m",
    b"\xe2\x80\xae",
    b"(",
    b"{",
    b"'",
    b'"',
    b"=",
    b"1e999",
    b"nan",
    b"-",
    b"+",
    b"*",
    b"&a",
    b"*a",
    b"<<: ",
    b"!!python/x ",
    b".include a.inc\n",
    b".lib models.lib hot\n",
    b".subckt A a\n",
    b".ends\n",
    b"X9 a A\n",
    b".param x={x}\n",
    b".func f(x) {f(x)}\n",
    b"0",
    b" ",
]


@st.composite
def damaged(draw: st.DrawFn, files: list[bytes]) -> bytes:
    """One of the files, or two joined, with up to six wounds."""
    data = draw(st.sampled_from(files))[:LONGEST]
    for wound in draw(st.lists(st.sampled_from(list(_WOUNDS)), max_size=6)):
        place = draw(st.integers(0, max(len(data) - 1, 0)))
        data = _WOUNDS[wound](draw, data, place, files)
    return data


def _flip(draw: st.DrawFn, data: bytes, place: int, files: list[bytes]) -> bytes:
    byte = bytes([draw(st.integers(0, 255))])
    return data[:place] + byte + data[place + 1 :]


def _cut(draw: st.DrawFn, data: bytes, place: int, files: list[bytes]) -> bytes:
    return data[:place]


def _drop(draw: st.DrawFn, data: bytes, place: int, files: list[bytes]) -> bytes:
    return data[:place] + data[place + draw(st.integers(1, 80)) :]


def _splice(draw: st.DrawFn, data: bytes, place: int, files: list[bytes]) -> bytes:
    other = draw(st.sampled_from(files))[:LONGEST]
    return data[:place] + other[draw(st.integers(0, len(other))) :]


def _repeat(draw: st.DrawFn, data: bytes, place: int, files: list[bytes]) -> bytes:
    piece = data[place : place + draw(st.integers(1, 60))]
    return data[:place] + piece * draw(st.integers(2, 40)) + data[place:]


def _insert(draw: st.DrawFn, data: bytes, place: int, files: list[bytes]) -> bytes:
    return data[:place] + draw(st.sampled_from(SIGNS)) * draw(st.integers(1, 50)) + data[place:]


_WOUNDS = {
    "flip": _flip,
    "cut": _cut,
    "drop": _drop,
    "splice": _splice,
    "repeat": _repeat,
    "insert": _insert,
}
