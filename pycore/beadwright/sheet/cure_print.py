"""The cure sheet and the sealing record to print, from one evaluated job."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from html import escape
from typing import Any

from .printed import BOUNDARY, STYLE, head_lines


def cure_html(job: Mapping[str, Any], answer: Mapping[str, Any]) -> bytes:
    """A page that stands alone: the clock of each run with its record, the weather, the room, signatures."""
    cure = answer["cure"]
    title = job.get("title") if isinstance(job.get("title"), str) else ""
    parts = [
        "<!doctype html><html lang='en'><head><meta charset='utf-8'><meta name='viewport' content='width=device-width'>",
        f"<title>{escape(title or 'Job')} – cure sheet</title><style>{STYLE}</style></head><body><header><h1>{escape(title or 'Untitled job')}: cure sheet and sealing record</h1><dl class='head'>",
        *(f"<div><dt>{escape(label)}</dt><dd>{escape(value)}</dd></div>" for label, value in head_lines(job, answer)),
        f"</dl></header><p>{escape(BOUNDARY)}</p>",
    ]
    if not cure.get("runs") and not cure.get("room"):
        parts.append("<p>Nothing is entered for the cure of this job yet.</p>")
    else:
        parts += ["<section><h2>At a glance</h2>", *_bands(cure["answers"]), *_drawings(cure["drawings"]), *_tables(cure["tables"]), "</section>"]
        for run in cure["runs"].values():
            parts += _run(run)
        if cure.get("room"):
            room = cure["room"]
            parts += ["<section><h2>Air of the room</h2>", *_bands(room["answers"]), *_drawings(room["drawings"]), *_tables(room["tables"]), *_notes(room["notes"]), *_steps(room["steps"]), "</section>"]
    parts.append("<div class='sign'><div>Sealed by, date</div><div>Checked by, date</div><div>Accepted by, date</div></div></body></html>")
    return "".join(parts).encode("utf-8")


def _run(run: Mapping[str, Any]) -> Iterable[str]:
    yield f"<section><h2>{escape(run['name'])}</h2>"
    yield f"<p>{'Planned for' if run['is_planned'] else 'Sealed'} {escape(run['start_text'] or '–')}</p>"
    if run["trouble"]:
        yield f"<p class='verdict'>{escape(run['trouble']['text'])}</p>"
    yield from _bands(run["answers"])
    yield from _drawings(run["drawings"])
    yield from _tables(run["tables"])
    yield from _notes(run["notes"])
    yield "<h3>Sealing record</h3><table><tbody>"
    yield from (f"<tr><th>{escape(line['label'])}</th><td>{escape(line['value']) or '&nbsp;'}</td></tr>" for line in run["record"])
    yield "</tbody></table>"
    yield from _steps(run["steps"])
    yield "</section>"


def _bands(bands: Iterable[Mapping[str, str]]) -> Iterable[str]:
    found = list(bands)
    if found:
        yield "<table><tbody>"
        yield from (f"<tr><th>{escape(band['question'])}</th><td><b>{escape(band['answer'])}</b></td><td>{escape(band['detail'])}</td></tr>" for band in found)
        yield "</tbody></table>"


def _drawings(drawings: Iterable[Mapping[str, Any]]) -> Iterable[str]:
    yield from (drawing["svg"] for drawing in drawings)


def _tables(tables: Iterable[Mapping[str, Any]]) -> Iterable[str]:
    for table in tables:
        yield f"<h3>{escape(table['title'])}</h3><table><thead><tr>"
        yield from (f"<th class='{'r' if column['align'] == 'right' else ''}'>{escape(column['label'])}</th>" for column in table["columns"])
        yield "</tr></thead><tbody>"
        for row in table["rows"]:
            cells = "".join(f"<td class='{'r' if column['align'] == 'right' else ''}'>{escape(cell)}</td>" for cell, column in zip(row["cells"], table["columns"], strict=True))
            yield f"<tr>{cells}</tr>"
        yield f"</tbody></table><p class='src'>{escape(table['note'])}</p>"


def _notes(notes: Iterable[Mapping[str, str]]) -> Iterable[str]:
    yield from (f"<p><b>{escape(note['severity'].capitalize())}.</b> {escape(note['text'])}</p>" for note in notes)


def _steps(steps: Iterable[Mapping[str, Any]]) -> Iterable[str]:
    found = list(steps)
    if found:
        yield "<h3>Working</h3>"
    for step in found:
        remark = f"<br>{escape(step['remark'])}" if step.get("remark") else ""
        yield (
            f"<div class='step'>{escape(step['title'])}<br><b>{escape(step['symbol'])}</b> = {escape(step['formula'])}"
            f"{' = ' + escape(step['numbers']) if step['numbers'] else ''} = <b>{escape(step['result'])}</b>{remark}"
            f"<br><span class='src'>{escape(step['source'])} ({escape(step['status'])})</span></div>"
        )


def cure_text(answer: Mapping[str, Any]) -> str:
    """The same for a terminal, as lines that end the sheet; empty where nothing is entered."""
    cure = answer["cure"]
    if not cure.get("runs") and not cure.get("room"):
        return ""
    lines = ["", "Cure", "----"]
    for run in cure["runs"].values():
        lines += ["", f"  {run['name']}: {'planned for' if run['is_planned'] else 'sealed'} {run['start_text'] or '–'}"]
        if run["trouble"]:
            lines.append(f"    {run['trouble']['text']}")
        lines += [f"    {band['question']:<36} {band['answer']}\n{'':41}{band['detail']}" for band in run["answers"]]
        lines += [f"    {stage['label']:<20} {stage['at_text']}" for stage in run["stages"] if stage["applies"]]
        lines += [f"    {note['severity'].upper()}: {note['text']}" for note in run["notes"]]
    room = cure.get("room")
    if room:
        lines += ["", "  Air of the room"]
        lines += [f"    {band['question']:<36} {band['answer']}\n{'':41}{band['detail']}" for band in room["answers"]]
        lines += [f"    {note['severity'].upper()}: {note['text']}" for note in room["notes"]]
    return "\n".join(lines) + "\n"
