"""The sheet to print and the sheet to read in a terminal, from one evaluated job."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from html import escape
from typing import Any

BOUNDARY = (
    "Local law, the contract specification, the sealant maker's instructions and the judgement of a licensed professional govern. "
    "This sheet records and computes; it approves nothing."
)

STYLE = """
body{font:11pt/1.4 system-ui,sans-serif;color:#111;background:#fff;margin:12mm auto;max-width:180mm;padding:0 4mm}
header{border-bottom:2pt solid #111;margin-bottom:6mm}h1{font-size:17pt;margin:0}h2{font-size:14pt;border-bottom:1pt solid #111;margin:9mm 0 2mm}h3{font-size:11pt;margin:5mm 0 1mm}
dl.head{display:flex;flex-wrap:wrap;gap:1mm 8mm;margin:2mm 0}dl.head div{display:flex;gap:2mm}dt{color:#444}dd{margin:0;font-weight:600}
table{border-collapse:collapse;width:100%;font-variant-numeric:tabular-nums;font-size:9.5pt}th,td{border-bottom:.5pt solid #888;padding:1mm 2mm;text-align:left;vertical-align:top}td.r,th.r{text-align:right}
.verdict{font-size:14pt;font-weight:700}svg{width:100%;max-width:140mm;height:auto;display:block;margin:2mm auto}
.step{break-inside:avoid;border-bottom:.5pt dotted #999;padding:1mm 0;font-size:9.5pt}.step b{font-weight:600}.src{color:#444;font-size:8.5pt}
section{break-before:page}section:first-of-type{break-before:auto}thead{display:table-header-group}.sign{display:flex;gap:10mm;margin-top:14mm}.sign div{flex:1;border-top:.5pt solid #111;padding-top:1mm;font-size:9pt}
@page{margin:14mm}@media print{body{margin:0;max-width:none}}
"""


def head_lines(job: Mapping[str, Any], answer: Mapping[str, Any]) -> list[tuple[str, str]]:
    """What stands in the title block of a sheet, as label and value; empty ones are left out."""

    def text(key: str) -> str:
        value = job.get(key)
        return value if isinstance(value, str) else ""

    pairs = [("Reference", text("reference")), ("Revision", text("revision")), ("Date", text("date")), ("Prepared by", text("prepared_by")), ("Responsible", text("responsible"))]
    pairs += [(str(fact["label"]), str(fact["value"])) for fact in answer["facts"]]
    pairs.append(("Computed by", f"Beadwright {answer['core']['version']}"))
    return [(label, value) for label, value in pairs if value]


def sheet_html(job: Mapping[str, Any], answer: Mapping[str, Any]) -> bytes:
    """A page that stands alone: title block, each joint with drawing, bands, tables and working, cautions, signatures."""
    title = job.get("title") if isinstance(job.get("title"), str) else ""
    parts = [
        "<!doctype html><html lang='en'><head><meta charset='utf-8'><meta name='viewport' content='width=device-width'>",
        f"<title>{escape(title or 'Joint sheet')}</title><style>{STYLE}</style></head><body><header><h1>{escape(title or 'Untitled job')}</h1><dl class='head'>",
        *(f"<div><dt>{escape(label)}</dt><dd>{escape(value)}</dd></div>" for label, value in head_lines(job, answer)),
        f"</dl></header><p>{escape(BOUNDARY)}</p>",
    ]
    for joint in answer["joints"].values():
        parts += _joint_html(joint)
    if answer["takeoff"].get("answers"):
        parts += ["<section><h2>Take-off</h2>", *_body_html(answer["takeoff"]), "</section>"]
    parts += _cautions_html(answer["cautions"])
    parts.append("<div class='sign'><div>Prepared by, date</div><div>Checked by, date</div><div>Accepted by, date</div></div></body></html>")
    return "".join(parts).encode("utf-8")


def _joint_html(joint: Mapping[str, Any]) -> Iterable[str]:
    yield f"<section><h2>{escape(joint['name'])}</h2><p>{escape(joint['kind_word'])}{' – ' + escape(joint['place']) if joint['place'] else ''}</p>"
    yield f"<p class='verdict'>{escape(joint['verdict_word'])}</p><p>{escape(joint['verdict_text'])}</p>"
    yield from _body_html(joint)
    yield from _face_html(joint.get("face"))
    yield "</section>"


_GATE_WORDS = {True: "good", False: "not good", None: "not known"}


def _face_html(face: Mapping[str, Any] | None) -> Iterable[str]:
    """The answer at the face with every gate, so that the record says what passed and what did not."""
    if not face:
        return
    yield f"<h3>At the face</h3><p class='verdict'>{escape(face['verdict_word'])}</p><p>{escape(face['verdict_text'])}</p>"
    if face["checks"]:
        yield "<table><thead><tr><th>Gate</th><th class='r'>Found</th><th class='r'>Limit</th><th>Judged</th></tr></thead><tbody>"
        for check in face["checks"]:
            yield f"<tr><td>{escape(check['label'])}</td><td class='r'>{escape(check['value'])}</td><td class='r'>{escape(check['limit'])}</td><td>{_GATE_WORDS[check['pass']]}. {escape(check['text'])}</td></tr>"
        yield "</tbody></table>"
    yield from _body_html({"answers": face["answers"], "steps": face["steps"]})


def _body_html(joint: Mapping[str, Any]) -> Iterable[str]:
    """Drawing, bands, tables, notes and working of one part of the answer."""
    if joint.get("drawing"):
        yield joint["drawing"]
    if joint.get("answers"):
        yield "<table><tbody>"
        for band in joint["answers"]:
            yield f"<tr><th>{escape(band['question'])}</th><td><b>{escape(band['answer'])}</b></td><td>{escape(band['detail'])}</td></tr>"
        yield "</tbody></table>"
    for table in joint.get("tables", ()):
        yield f"<h3>{escape(table['title'])}</h3><table><thead><tr>"
        yield from (f"<th class='{'r' if column['align'] == 'right' else ''}'>{escape(column['label'])}</th>" for column in table["columns"])
        yield "</tr></thead><tbody>"
        for row in table["rows"]:
            cells = "".join(f"<td class='{'r' if column['align'] == 'right' else ''}'>{escape(cell)}</td>" for cell, column in zip(row["cells"], table["columns"], strict=True))
            yield f"<tr>{cells}</tr>"
        yield f"</tbody></table><p class='src'>{escape(table['note'])}</p>"
    yield from (f"<p><b>{escape(note['severity'].capitalize())}.</b> {escape(note['text'])}</p>" for note in joint.get("notes", ()))
    if joint.get("steps"):
        yield "<h3>Working</h3>"
        for step in joint["steps"]:
            remark = f"<br>{escape(step['remark'])}" if step.get("remark") else ""
            yield (
                f"<div class='step'>{escape(step['title'])}<br><b>{escape(step['symbol'])}</b> = {escape(step['formula'])}"
                f"{' = ' + escape(step['numbers']) if step['numbers'] else ''} = <b>{escape(step['result'])}</b>{remark}"
                f"<br><span class='src'>{escape(step['source'])} ({escape(step['status'])})</span></div>"
            )


def _cautions_html(cautions: Iterable[Mapping[str, Any]]) -> Iterable[str]:
    found = list(cautions)
    if not found:
        return
    yield "<section><h2>Cautions</h2>"
    yield from (f"<p><b>{escape(item['title'])}.</b> {escape(item['text'])} <span class='src'>{escape(item['source'])}</span></p>" for item in found)
    yield "</section>"


def sheet_text(job: Mapping[str, Any], answer: Mapping[str, Any]) -> str:
    """The same sheet for a terminal."""
    title = job.get("title") if isinstance(job.get("title"), str) else ""
    lines = [title or "Untitled job", "=" * max(12, len(title or "Untitled job"))]
    lines += [f"{label}: {value}" for label, value in head_lines(job, answer)]
    lines += ["", BOUNDARY, ""]
    lines += [f"{issue['severity'].upper()} {issue['path'] or '/'}: {issue['message']}" for issue in answer["issues"]]
    for joint in answer["joints"].values():
        heading = f"{joint['name']} ({joint['kind_word'].lower()})"
        lines += ["", heading, "-" * len(heading), f"{joint['verdict_word'].upper()}: {joint['verdict_text']}", *_body_text(joint)]
    if answer["takeoff"].get("answers"):
        lines += ["", "Take-off", "--------", *_body_text(answer["takeoff"])]
    if answer["cautions"]:
        lines += ["", "Cautions", "--------"]
        lines += [f"  {item['title']}: {item['text']}\n    [{item['source']}]" for item in answer["cautions"]]
    return "\n".join(lines) + "\n"


def _body_text(joint: Mapping[str, Any]) -> list[str]:
    """Bands, tables, notes and working of one part of the answer."""
    lines = [f"  {band['question']:<32} {band['answer']}\n{'':35}{band['detail']}" for band in joint.get("answers", ())]
    for table in joint.get("tables", ()):
        lines += ["", f"  {table['title']}", *_text_table(table)]
    lines += [f"  {note['severity'].upper()}: {note['text']}" for note in joint.get("notes", ())]
    if joint.get("steps"):
        lines += ["", "  Working"]
        for step in joint["steps"]:
            numbers = f" = {step['numbers']}" if step["numbers"] else ""
            lines += [f"    {step['title']}", f"      {step['symbol']} = {step['formula']}{numbers} = {step['result']}", f"      [{step['source']}; {step['status']}]"]
    return lines


def _text_table(table: Mapping[str, Any]) -> list[str]:
    grid = [[column["label"] for column in table["columns"]], *(row["cells"] for row in table["rows"])]
    sizes = [max(len(row[index]) for row in grid) for index in range(len(grid[0]))]
    out = []
    for row in grid:
        cells = [cell.rjust(size) if column["align"] == "right" else cell.ljust(size) for cell, size, column in zip(row, sizes, table["columns"], strict=True)]
        out.append("    " + "  ".join(cells).rstrip())
    return [*out, f"    {table['note']}"]
