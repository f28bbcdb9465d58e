#!/usr/bin/python3
"""Doxygen finds nothing to complain of, and everything public has its sentence."""
import pathlib
import re
import subprocess
import tempfile
import unittest
import xml.etree.ElementTree as xml

SOURCE = pathlib.Path(__file__).resolve().parents[2]


def is_described(element, parents):
    """Whether it, or the named group it stands in, has words of its own."""
    for tag in ("briefdescription", "detaileddescription"):
        text = element.find(tag)
        if text is not None and "".join(text.itertext()).strip():
            return True
    section = parents.get(element)
    return section is not None and section.tag == "sectiondef" and section.find("header") is not None


def says_all_itself(name, arguments, owner):
    """Accessors without arguments, constructors, operators, deduction guides: what they do is said where their type is."""
    is_special = name == owner or arguments.endswith("=delete") or name.startswith(("~", "operator", "explicit(")) or "->" in arguments
    return is_special or bool(re.match(r"\(\)( const)?( noexcept)?( override)?(=0| =0)?$", arguments.strip()))


def lacking(folder):
    """What is public and has no sentence: its file, line and name."""
    found = []
    for file in sorted(folder.glob("*.xml")):
        for compound in xml.parse(file).getroot().findall("compounddef"):
            kind, name = compound.get("kind"), compound.findtext("compoundname")
            if kind not in ("struct", "class", "namespace"):
                continue
            parents = {child: parent for parent in compound.iter() for child in parent}
            owner = re.sub("<.*", "", name).split("::")[-1]
            if kind != "namespace" and compound.get("prot") == "public" and not is_described(compound, {}):
                found.append((compound.find("location"), name))
            for member in compound.iter("memberdef"):
                if member.get("prot") != "public" or is_described(member, parents):
                    continue
                what, called, arguments = member.get("kind"), member.findtext("name"), member.findtext("argsstring") or ""
                is_plain = what in ("variable", "friend") or called in ("value_type", "Value")
                if is_plain or (what == "function" and says_all_itself(called, arguments, owner if kind != "namespace" else None)):
                    continue
                found.append((member.find("location"), f"{name}::{called}{arguments}"))
    return sorted({f"{place.get('file')}:{place.get('line')}: {what}" for place, what in found})


class ApiDocs(unittest.TestCase):
    def test_without_warnings_and_nothing_public_lacks_its_sentence(self):
        with tempfile.TemporaryDirectory(prefix="rillclock-api-") as folder:
            settings = (SOURCE / "scripts/doxygen/Doxyfile").read_text(encoding="utf-8")
            run = subprocess.run(["doxygen", "-"], input=f"{settings}\nOUTPUT_DIRECTORY = {folder}\n", cwd=SOURCE, capture_output=True,
                                 text=True, check=False)
            self.assertEqual((run.returncode, run.stderr), (0, ""))
            self.assertEqual(lacking(pathlib.Path(folder) / "xml"), [])
            main_page = (pathlib.Path(folder) / "html/index.html").read_text(encoding="utf-8")
            for example in sorted((SOURCE / "scripts/examples").glob("*.cpp")):
                self.assertIn(example.name, main_page)


if __name__ == "__main__":
    unittest.main()
