"""How an old office file keeps a stream of bytes: sectors, chains and a directory (the published compound file format)."""

import struct

from analysis import refusals

_END = 0xFFFFFFFA  # sector numbers from here on are signs, not sectors
_ENTRY = 128  # bytes of a directory entry


def stream(data: bytes, names: tuple[str, ...]) -> bytes:
    """Return the first stream that has one of these names; raises DamagedFile where the chains do not hold."""
    try:
        return _Compound(data).stream(names)
    except (struct.error, IndexError, ValueError) as error:
        raise refusals.DamagedFile("workbook") from error


class _Compound:
    """The sectors of a compound file and the chains that link them."""

    def __init__(self, data: bytes) -> None:
        self.data = data
        self.size = 1 << min(struct.unpack_from("<H", data, 30)[0], 20)
        self.small = 1 << min(struct.unpack_from("<H", data, 32)[0], 20)
        self.directory_start, self.cutoff, self.small_start = struct.unpack_from("<I4xI I", data, 48)
        self.chains = self._numbers(self._chain_sectors())
        self.directory = self._joined(self.directory_start)

    def _chain_sectors(self) -> list[int]:
        """The sectors that hold the chains: 109 listed in the header, more in sectors of their own."""
        listed = list(struct.unpack_from("<109I", self.data, 76))
        following, left = struct.unpack_from("<II", self.data, 68)
        while following < _END and left:
            more = struct.unpack_from(f"<{self.size // 4}I", self.data, (following + 1) * self.size)
            listed.extend(more[:-1])
            following, left = more[-1], left - 1
        return [sector for sector in listed if sector < _END]

    def _sector(self, number: int) -> bytes:
        return self.data[(number + 1) * self.size : (number + 2) * self.size]

    def _numbers(self, sectors: list[int]) -> list[int]:
        joined = b"".join(map(self._sector, sectors))
        return list(struct.unpack(f"<{len(joined) // 4}I", joined[: len(joined) // 4 * 4]))

    def _chain(self, start: int, chains: list[int]) -> list[int]:
        """The sectors of a chain; one that returns to itself has no end and is refused."""
        sectors, number = [], start
        while number < _END:
            sectors.append(number)
            if len(sectors) > len(chains):
                raise ValueError("a chain of sectors without an end")
            number = chains[number]
        return sectors

    def _joined(self, start: int) -> bytes:
        return b"".join(map(self._sector, self._chain(start, self.chains)))

    def stream(self, names: tuple[str, ...]) -> bytes:
        """The bytes of the first stream with one of these names, b"" where there is none."""
        root_start = struct.unpack_from("<I", self.directory, 116)[0]
        for place in range(0, len(self.directory) - _ENTRY + 1, _ENTRY):
            length = min(struct.unpack_from("<H", self.directory, place + 64)[0], 64)
            name = self.directory[place : place + max(0, length - 2)].decode("utf-16-le", errors="replace")
            if name in names:
                start, size = struct.unpack_from("<II", self.directory, place + 116)
                return self._small_stream(start, root_start)[:size] if size < self.cutoff else self._joined(start)[:size]
        return b""

    def _small_stream(self, start: int, root_start: int) -> bytes:
        """A short stream lies in small sectors inside the stream of the root."""
        holder = self._joined(root_start)
        chains = self._numbers(self._chain(self.small_start, self.chains))
        return b"".join(holder[number * self.small : (number + 1) * self.small] for number in self._chain(start, chains))
