"""Hostile words in a feed stay words: no element of the feed comes from a record."""

import xml.etree.ElementTree as ElementTree

from sheetgen.press import press

ATTACK = 'Copper <script>alert(1)</script> ]]> &lt;img src=x onerror=alert(1)&gt; "><svg onload=alert(1)>'
ATOM = "{http://www.w3.org/2005/Atom}"


def test_a_name_cannot_put_markup_into_the_feed(small_handbook, tmp_path):
    press(small_handbook, tmp_path / "earlier")
    (small_handbook / "editions").mkdir()
    earlier = (tmp_path / "earlier" / "data" / "handbook.json").read_bytes()
    (small_handbook / "editions" / "1.json").write_bytes(earlier)
    imprint = small_handbook / "handbook.yaml"
    imprint.write_text(imprint.read_text() + "date: 2026-12-01\nprevious edition: editions/1.json\n")
    record = small_handbook / "copper.yaml"
    text = record.read_text().replace("3.6149(3)", "3.6249(3)")
    record.write_text(text.replace("name: Copper", f"name: '{ATTACK}'"))
    press(small_handbook, tmp_path / "site")

    feed = ElementTree.parse(tmp_path / "site" / "changes.atom").getroot()
    assert all(element.tag.startswith(ATOM) for element in feed.iter())
    titles = [title.text for title in feed.iter(f"{ATOM}title")]
    assert any("<script>alert(1)</script>" in title for title in titles), titles
    for element in feed.iter():
        # What a reader of feeds would set as HTML must have been escaped once more.
        if element.get("type") == "html":
            assert "<script" not in (element.text or "").lower()
        assert not any(value.strip().lower().startswith("javascript:") for value in element.attrib.values())
