"""What a reader should know before the first operation: the document's own introduction, and its tags.

Text only. What is promised here is held by tests elsewhere; a sentence that no test holds does not belong
here.
"""

from __future__ import annotations

TITLE = "Loopslack"
SUMMARY = "Sizes the expansion vessel of a closed glycol collector loop and follows it into stagnation."

DESCRIPTION = """
Ask with the numbers of a collector loop, and get the expansion vessel, the pressures to set and what the
loop does when the pump stops in full sun: how hot it gets, how far steam reaches, what the gauge reads,
whether the relief valve opens, whether the membrane survives, and what would mend it.

## Asking

* A question is a `POST` with one JSON object. It changes nothing and nothing is kept: the same question
  gets the same bytes from the same version of the service, so it may be sent again at any time without a
  key against doubling.
* Few members are required. Every default that was used is listed in the answer under `assumptions`, with
  its source.
* A quantity is a number with its unit, `{"value": 6, "unit": "barg"}`. Gauge or absolute is part of a
  pressure's unit. The units of each kind are a closed list; texts are never parsed. `units` chooses the
  units of the answer.
* Members that are not known are refused, with a hint at the nearest known name. For an optional member
  `null` means absent; where the schema cannot say so (objects, lists, words), its description does.
* Defaults are told in the descriptions. There is no `default` keyword, so that no client sends what you did
  not state.

## Reading the answer

* The verdict comes first: `holds`, `favourable-only`, `does-not-hold` or `not-assessed`. It is the worst of
  all core checks, in the base case and under the doubts asked for. What could not be checked never counts
  as passed.
* A design that does not hold is an answer with status 200, not a problem: it has the verdict, the reasons
  and, where there are any, remedies that were computed.
* Numbers are rounded once, to six significant digits, after all verdicts were taken.
* Members that would be empty are absent. Members may be added to answers within version 1, so ignore what
  you do not know. Questions and quantities are closed.
* The closed lists of words that answers use never grow within version 1. Codes of checks, advisories,
  cautions and refusals are texts and may.

## Refusals

Every path also has `OPTIONS`, which tells its methods in `Allow`, and those with `GET` have `HEAD`. A key is
asked for only where whoever runs the service has said so.

Whatever cannot be answered comes back as a problem document (RFC 9457) with *all* faulty members, each with
a JSON Pointer, a stable code and a message that names value, rule and remedy. Before the service sees a
request, its server may refuse it with a plain or empty body: 400 for a malformed request line or header,
414 and 431 for too long ones.

## Versions

The path carries the major version. Within it, members and operations are added, nothing is taken away or
changes its meaning; names of operations, schemas and constants stay. An operation that is to go says so in
`Deprecation` (RFC 9745) and `Sunset` (RFC 8594) headers a year ahead. A release that changes a number says
so in its change log.

## Generating a client

The settings we test are part of this project, under `openapi/generators`: TypeScript, Python, Kotlin and
Swift.
""".strip()

TAGS: dict[str, str] = {
    "Design": "The whole job, for one loop or for many.",
    "Parts": "Content and expansion by themselves.",
    "Check": "A given vessel: in stagnation, over a day without flow, years after it was filled.",
    "Bulk": "Designs as a stream of lines, for programs that read and write lines.",
    "Sheet": "A design as a page to print and sign.",
    "Reference": "Tables the service works with. They change only with its version, so keep them.",
    "Service": "The service about itself, for those who run it.",
}
