"""An edition's files held against those made again.

With the program and the libraries that made it every byte has to be the same.  With others, numbers and data still
have to be; the document may choose other words for what it states; and pages, tables, figures and extracts have to
say what the filed document says, when it is set again today.
"""

import json
from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Final

from rankdocket.document.model import Document
from rankdocket.document.plain import document_from_plain
from rankdocket.errors import InputError, RankdocketError
from rankdocket.register.manifest import SUMS_FILE
from rankdocket.render.rendition import render
from rankdocket.study.reader import read_spec
from rankdocket.study.spec import StudySpec
from rankdocket.study.writer import spec_as_used
from rankdocket.workflow.differences import MALFORMED, counted, name_differences, shown_differences
from rankdocket.workflow.edition_files import CHECKER, Made, rendition_files
from rankdocket.workflow.verify_document import Fresh, document_problems, word_remarks
from rankdocket.workflow.verify_program import Change

DOCUMENT: Final = "document.json"
SPEC_AS_USED: Final = "spec-as-used.yaml"
_SET_FROM_DOCUMENT: Final = ("report.", "tables/", "figures/", "extracts/")


@dataclass(frozen=True, slots=True)
class Compared:
    """What comparing came to: what does not agree, what could not be checked, what differs without touching a number."""

    problems: tuple[str, ...]
    unchecked: tuple[str, ...]
    remarks: tuple[str, ...]


def compare(filed: Mapping[str, bytes], made: Made, spec: StudySpec, change: Change) -> Compared:
    """Hold every file of an edition but its list of digests against the edition made again."""
    return _Comparison(filed, made, spec, change).compared()


class _Comparison:
    """A walk over the files of one edition; what is found is gathered."""

    def __init__(self, filed: Mapping[str, bytes], made: Made, spec: StudySpec, change: Change) -> None:
        self.filed = filed
        self.made = made
        self.spec = spec
        self.change = change
        self.problems: list[str] = []
        self.unchecked: list[str] = []
        self.remarks: list[str] = []

    def compared(self) -> Compared:
        again = {name: content for name, content in self.made.files.items() if not _is_set(name)}
        pages = self._pages()
        for name in sorted(self.filed.keys() - {SUMS_FILE} | again.keys() | (pages or {}).keys()):
            if _is_set(name) and pages is None:
                self.unchecked.append(f"{name}: not verified, because the filed document could not be set again.")
                continue
            expected = (pages or {}).get(name) if _is_set(name) else again.get(name)
            if expected is None or name not in self.filed:
                self.problems.append(f"{name}: only in the {'edition' if name in self.filed else 'recomputation'}.")
            elif self.filed[name] != expected:
                self._differ(name, self.filed[name], expected)
        if self.remarks and self.change.told:
            self.remarks.append(f"Possible cause: {'; '.join(self.change.told)}.")
        return Compared(tuple(self.problems), tuple(self.unchecked), tuple(self.remarks))

    def _pages(self) -> Mapping[str, bytes] | None:
        """Return what the filed document gives when it is set today; ``None`` when it cannot be."""
        filed = self.filed.get(DOCUMENT)
        if not self.change.told or filed is None or filed == self.made.files[DOCUMENT]:
            return {name: content for name, content in self.made.files.items() if _is_set(name)}
        try:
            return rendition_files(render(document_of(filed)))
        except (RankdocketError, *MALFORMED) as error:
            self.unchecked.append(f"{DOCUMENT}: not verified, because it cannot be set by this program ({error}).")
            return None

    def _differ(self, name: str, filed: bytes, made: bytes) -> None:
        differences = name_differences(name, filed, made)
        if _is_set(name) and self.change.told:
            seen = shown_differences(name, filed, made)
            self.problems += seen
            if not seen:
                self.remarks.append(f"{name}: other looks, the same words and numbers; looks were not checked.")
        elif not self.change.program:
            self.problems += differences
        elif name == DOCUMENT:
            self._document(filed)
        elif name == SPEC_AS_USED:
            self._spec_as_used(filed, made)
        elif name == CHECKER:
            self.remarks.append(f"{name}: not the one of this program, and not checked.")
        elif name == "README.txt":
            self.remarks.append(f"{name}: words differ in {counted(len(differences), 'place')}.")
        else:
            self.problems += differences

    def _document(self, filed: bytes) -> None:
        text = self.filed.get(SPEC_AS_USED, b"").decode("utf-8", "replace")
        fresh = Fresh(self.made.document, self.made.plain, self.spec, text)
        try:
            document = document_of(filed)
            problems = tuple(dict.fromkeys(document_problems(document, fresh)))
            remarks = word_remarks(document, fresh.document)
        except MALFORMED as error:
            self.unchecked.append(f"{DOCUMENT}: not verified, because it cannot be read by this program ({error}).")
            return
        self.problems += [f"{DOCUMENT}: {problem}" for problem in problems]
        self.remarks += [f"{DOCUMENT}: {remark}" for remark in remarks]

    def _spec_as_used(self, filed: bytes, made: bytes) -> None:
        try:
            again = spec_as_used(read_spec(filed.decode("utf-8"), SPEC_AS_USED)).encode("utf-8")
        except (InputError, *MALFORMED) as error:
            self.unchecked.append(f"{SPEC_AS_USED}: not verified, because this program cannot read it ({error}).")
            return
        differences = name_differences(SPEC_AS_USED, again, made)
        self.problems += differences
        if not differences:
            self.remarks.append(f"{SPEC_AS_USED}: other looks, the same values.")


def document_of(data: bytes) -> Document:
    """Read a document.json; raises one of MALFORMED when it holds something else."""
    document = document_from_plain(json.loads(data))
    # Works are listed by their text, and an object of JSON has no order of its own.
    works = dict(sorted(document.references.items(), key=lambda work: work[1]))
    return replace(document, references=works)


def _is_set(name: str) -> bool:
    return name.startswith(_SET_FROM_DOCUMENT)
