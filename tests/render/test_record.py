"""The record: clean, complete, the same every time; its inspector finds what does not belong."""

import base64
import hashlib
import re

import pytest
from nbformat.v4 import new_code_cell, new_markdown_cell, new_notebook, new_output, new_raw_cell
from tests.render import demo

from throughfault.errors import DeclarationError, RunError
from throughfault.render.record import data_ids, export_record, exporter, lint, loose_digits, normalise
from throughfault.render.record.sanitise import sanitise

PAGE = export_record(demo.notebook(), demo.RESULTS)


def record(*cells):
    return export_record(new_notebook(cells=list(cells)), demo.RESULTS)


def shown(markup, kind="text/html"):
    return new_code_cell("tf.x(review)", outputs=[new_output("execute_result", data={kind: markup}, execution_count=1)])


def test_the_record_is_clean():
    """Nothing could load, run or restyle."""
    assert lint(PAGE) == []


def test_the_record_has_no_loose_digits():
    """Every number is data, formula, name, citation or version."""
    assert loose_digits(PAGE) == []


def test_sanitising_keeps_every_number_and_formula():
    """What the parts show arrives on the page unchanged."""
    given = "".join(map(str, demo.html().values()))
    assert data_ids(PAGE) == data_ids(given)
    assert PAGE.count("<math") == given.count("<math")
    assert PAGE.count("<annotation") == given.count("<annotation")
    assert PAGE.count("<img") == given.count("<img") == 4


def test_equal_bytes_every_time():
    """A second export of a second notebook is the same page."""
    assert export_record(demo.notebook(), demo.RESULTS) == PAGE


def test_policy_admits_only_the_page_s_own_style():
    """The hash is that of the style element's text."""
    style = re.search(r"<style>(.*?)</style>", PAGE, re.DOTALL)[1]
    digest = base64.b64encode(hashlib.sha256(style.encode()).digest()).decode()
    assert (
        f"default-src 'none'; script-src 'none'; style-src 'sha256-{digest}'; img-src data:; font-src data:; base-uri 'none'; form-action 'none'"
        in PAGE
    )


def test_tag_revision_and_page_number_on_every_page():
    """By margin boxes of the printed page."""
    assert '@top-left{content:"BV-T1"}' in PAGE
    assert '@top-right{content:"Revision A"}' in PAGE
    assert 'content:"Page " counter(page) " of " counter(pages)' in PAGE
    assert "size:A4" in PAGE


def test_a_tag_cannot_leave_its_style_string():
    """Quotes and braces of a tag are written as code points."""
    unit = {"unit": {"tag": '"}</style><script>', "revision": "A\n", "title": "<b>"}}
    page = export_record(new_notebook(), unit)
    assert lint(page) == []
    assert '@top-left{content:"\\22 \\7d \\3c \\2f style\\3e \\3c script\\3e "}' in page


def test_landmarks_and_skip_link():
    """One heading of the first level, a main landmark, a way past the head."""
    assert PAGE.count("<h1>") == PAGE.count("<main ") == PAGE.count("<header ") == 1
    assert '<html lang="en">' in PAGE
    assert '<a class="skip" href="#record">' in PAGE
    assert 'scope="col"' in PAGE
    assert 'scope="row"' in PAGE


def test_contents_follow_the_summary_and_lead_somewhere():
    """Every entry is the id of a heading."""
    nav = re.search(r'<nav class="contents".*?</nav>', PAGE, re.DOTALL)[0]
    links = re.findall(r'href="#([^"]+)"', nav)
    assert len(links) == len(set(links)) == len(re.findall(r"<h[23][ >]", PAGE))
    assert all(f'id="{link}"' in PAGE for link in links)
    assert PAGE.index('id="cautions"') < PAGE.index(nav) < PAGE.index('id="unit-data"')


def test_contents_stand_first_without_a_place():
    """Headings of notes get ids of their own, none twice."""
    page = record(new_markdown_cell("# Kind\n\n## Duty\n\n### Duty\n\n## Duty $x_1$"))
    assert page.index("<nav") < page.index('<p class="kind">Kind</p>')
    assert re.findall(r'<h[23] id="([^"]+)"', page)[:2] == ["duty", "duty-2"]


def test_code_and_raw_cells_are_not_shown():
    """The notebook beside the record holds the code."""
    page = record(new_code_cell("secret_call()"), new_raw_cell("raw text"))
    assert "secret_call" not in page
    assert "raw text" not in page


@pytest.mark.parametrize("attack", [
    "<script>document.title='owned'</script>",
    "<img src=x onerror=\"document.title='owned'\">",
    "<p style='color:red'>x</p>",
    "<style>body{display:none}</style>",
    "<img src='http://example.invalid/a.png'>",
    "<svg><script>1</script><image href='http://example.invalid'/></svg>",
    "<iframe src='https://example.invalid'></iframe>",
    "<form action='https://example.invalid'><input name=a></form>",
    "<base href='https://example.invalid'>",
    "<meta http-equiv=refresh content='0;url=https://example.invalid'>",
    "<a href='javascript:alert(1)'>x</a>",
    "<link rel=stylesheet href='https://example.invalid/a.css'>",
    "<object data='data:text/html,x'></object>",
    "<math><maction actiontype=toggle href='javascript:1'><mi>x</mi></maction></math>",
    "<!-- a comment -->",
    "<img src='data:text/html;base64,AAAA'>",
    "<div onclick='x()'>x</div>",
    "<?xml version='1.0'?>",
    "<video src='data:,'></video>",
    "<![CDATA[x]]>",
])  # fmt: skip
def test_attacks_are_caught_twice(attack):
    """The exporter takes them out of an output; the inspector finds them pasted into a finished page."""
    assert lint(record(shown(attack))) == []
    pasted = PAGE.replace("<main ", attack + "<main ", 1)
    assert lint(pasted) != []


@pytest.mark.parametrize(("change", "fault"), [
    (lambda p: re.sub(r"<meta http-equiv.*?>", "", p), "the page must have one content security policy"),
    (lambda p: p.replace("img-src data:", "img-src *"), "the page must have one content security policy"),
    (lambda p: p.replace("html{background", "html{background:red;x"), "the page must have one content security policy"),
    (lambda p: p.replace("<style>", "<style>@import 'x';"), "the style sheet loads something."),
    (lambda p: p.replace("<style>", "<style>a{background:url(https://example.invalid)}"), "the style sheet loads something."),
    (lambda p: re.sub(r"<style>.*?</style>", "", p, flags=re.DOTALL), "the page must have one style element, it has 0."),
    (lambda p: p.replace('<meta charset="utf-8">', "<style></style>"), "must come first"),
    (lambda p: p.replace('<p class="tag">', '<p class="tag" class="x">'), "names an attribute twice"),
    (lambda p: p.replace('id="duty"', 'id="thermal"', 1), "id 'thermal' is used 2 times."),
    (lambda p: p.replace("<!DOCTYPE html>", "<!DOCTYPE svg>"), "a comment has no place"),
])  # fmt: skip
def test_the_inspector_reads_the_frame_too(change, fault):
    """Policy, style sheet, ids and doctype are the record's own."""
    changed = change(PAGE)
    assert changed != PAGE
    assert any(fault in found for found in lint(changed)), lint(changed)


def test_markdown_is_escaped_and_its_formulas_are_set():
    """A note cannot bring markup; formulas are MathML, code spans are names."""
    page = record(
        new_markdown_cell(
            "<script>1</script>\n\nA <b>note</b>: $\\frac{a}{b}$ and `K1`\n\n$$\nx^{2}\n$$\n\n|a|b|\n|-|-|\n|c|d|\n\n[l](javascript:x)"
        )
    )
    assert "<script" not in page
    assert page.count("<mfrac>") == 1
    assert '<div class="equation"><math display="block">' in page
    assert '<code class="identity">K1</code>' in page
    assert "<table>" in page
    assert "A &lt;b&gt;note&lt;/b&gt;" in page
    assert "javascript:" not in page


def test_a_note_with_a_wrong_formula_is_refused():
    """Nothing is guessed."""
    with pytest.raises(DeclarationError, match="cannot be set as a formula"):
        record(new_markdown_cell(r"$\wrong$"))


def test_other_outputs_are_text():
    """Plain and streamed text is escaped, Markdown is a note."""
    page = record(
        shown("<b>plain</b>", "text/plain"),
        shown("*note*", "text/markdown"),
        new_code_cell("", outputs=[new_output("stream", name="stdout", text="<i>said</i>")]),
    )
    assert "&lt;b&gt;plain&lt;/b&gt;" in page
    assert "<em>note</em>" in page
    assert "&lt;i&gt;said&lt;/i&gt;" in page


def test_html_is_preferred_to_plain_text():
    """A finding shows its HTML."""
    output = new_output("display_data", data={"text/plain": "PLAIN", "text/html": "<p>finding</p>"})
    page = record(new_code_cell("", outputs=[output]))
    assert "<p>finding</p>" in page
    assert "PLAIN" not in page


def test_a_notebook_that_failed_is_no_record():
    """The cell and its error are named."""
    output = new_output("error", ename="ValueError", evalue="wrong", traceback=[])
    with pytest.raises(RunError, match=re.escape("cell 1 ended in ValueError: wrong")):
        record(new_code_cell("", outputs=[output]))


def test_an_unclean_page_is_no_record(monkeypatch):
    """The last inspection stops what slipped through."""
    monkeypatch.setattr(exporter, "sanitise", lambda text: text)
    monkeypatch.setitem(exporter.RecordExporter.template_filters, "sanitise", lambda text: text)
    with pytest.raises(
        RunError, match=r"the record is not clean: line \d+: element 'script' is not on the allowlist\."
    ):
        record(shown("<script>1</script>"))


def test_links_stay_in_the_page_or_are_https():
    """Other schemes lose their address."""
    assert 'href="#duty"' in sanitise('<a href="#duty">x</a>')
    assert 'href="https://a.invalid/b"' in sanitise('<a href="https://a.invalid/b">x</a>')
    assert "href" not in sanitise('<a href="ftp://a.invalid">x</a>')


def test_normalised_notebook_forgets_time_and_host():
    """Ids are numbered, times and kernels dropped, counts start at one."""
    first, second = demo.notebook(), demo.notebook()
    for count, notebook in ((7, first), (19, second)):
        notebook.metadata.update(
            papermill={"start_time": count},
            kernelspec={"name": f"k{count}", "display_name": "x"},
            language_info={"name": "python", "version": f"3.{count}"},
        )
        for cell in notebook.cells:
            cell.metadata["papermill"] = {"duration": count}
            cell.metadata["execution"] = {"iopub.execute_input": count}
            cell.metadata["tags"] = ["finding"]
            if cell.cell_type == "code":
                cell.execution_count = count
                cell.outputs[0].update(execution_count=count, metadata={"host": count}, transient={"display_id": count})
    assert normalise(first) == normalise(second)
    made = normalise(first)
    assert [cell.id for cell in made.cells][:2] == ["cell-01", "cell-02"]
    assert [c.execution_count for c in made.cells if c.cell_type == "code"][:2] == [1, 2]
    assert made.cells[0].metadata == {"tags": ["finding"]}
    assert made.metadata["kernelspec"]["name"] == "python3"


def test_normalising_leaves_unrun_cells_unrun():
    """A cell without execution has no count."""
    made = normalise(new_notebook(cells=[new_code_cell("x")]))
    assert made.cells[0].execution_count is None


def test_loose_digits_are_found_wherever_they_hide():
    """Headings, table cells and captions are searched; exempt elements are not."""
    page = '<h2>Part 1</h2><td>2</td><br><span class="clause x">3</span><data value="4" data-id="a">4</data><math><mn>5</mn></math></p>6'
    assert loose_digits(page) == ["Part 1", "2", "6"]
