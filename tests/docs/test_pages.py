"""Every page is whole, leads only to what is there, and takes nothing from elsewhere."""

import re
from itertools import pairwise

import pytest
from litestar.testing import TestClient

from docs.pages import HTML, PAGES, anchors, elements, named, one
from loopslack.api.docs.frame import PAGES as LISTED
from loopslack.api.openapi import document_pages
from loopslack.api.v1 import OPERATIONS
from loopslack.app import create_app
from loopslack.settings import settings_from

SETTINGS = settings_from({"LOOPSLACK_SHED_LAG_SECONDS": "10", "LOOPSLACK_ACCESS_LOG": "false"})
SERVED = {page.path for page in document_pages()} | {
    operation.path for operation in OPERATIONS if operation.method == "GET"
}
EMBEDDING = {"src", "srcset", "data", "poster", "action", "formaction", "background", "ping", "manifest"}


@pytest.fixture(scope="module")
def client():
    with TestClient(create_app(SETTINGS)) as made:
        yield made


@pytest.mark.parametrize("path", HTML)
def test_a_page_is_well_formed_and_says_what_it_is(path: str) -> None:
    assert PAGES[path].body.startswith(b"<!doctype html>")
    assert one(path, "html").attributes["lang"] == "en"
    assert one(path, "title").text.endswith("Loopslack")
    assert one(path, "h1").text
    assert one(path, "main").text.strip()
    ids = [element.attributes["id"] for element in elements(path) if "id" in element.attributes]
    assert len(ids) == len(set(ids))
    assert all(ids)
    assert not any(" " in name for name in ids)


@pytest.mark.parametrize("path", HTML)
def test_headings_do_not_leave_out_a_level(path: str) -> None:
    levels = [int(element.name[1]) for element in named(path, "h1", "h2", "h3", "h4", "h5", "h6")]
    assert levels[0] == 1
    assert all(after <= before + 1 for before, after in pairwise(levels))


@pytest.mark.parametrize("path", HTML)
def test_every_link_of_a_page_leads_to_something(path: str) -> None:
    for element in elements(path):
        where = element.attributes.get("href")
        if where is None:
            continue
        target, _, anchor = where.partition("#")
        target = target or path
        assert target.startswith("/"), f"{where} leaves the service"
        assert target in PAGES or target in SERVED, f"{path} links to {where}, which is not there"
        if anchor:
            assert anchor in anchors(target), f"{path} links to {where}, which has no such place"


@pytest.mark.parametrize("path", HTML)
def test_a_page_points_its_labels_and_descriptions_at_something(path: str) -> None:
    for element in elements(path):
        for attribute in ("for", "aria-describedby", "aria-labelledby", "aria-controls"):
            for name in element.attributes.get(attribute, "").split():
                assert name in anchors(path), f"{path}: {attribute}={name}"
    labelled = {element.attributes["for"] for element in named(path, "label")}
    controls = {element.attributes["id"] for element in named(path, "input", "select", "textarea")}
    assert controls == labelled


@pytest.mark.parametrize("path", HTML)
def test_a_page_takes_nothing_from_elsewhere_and_runs_nothing_of_its_own(path: str) -> None:
    for element in elements(path):
        for name, value in element.attributes.items():
            assert not name.startswith("on"), f"{path}: {name}"
            assert name != "style"
            if name in EMBEDDING or (name == "href" and element.name in {"link", "use"}):
                assert value.startswith(("/docs/assets/", "#")), f"{path}: {name}={value}"
    assert not list(named(path, "style", "iframe", "object", "embed", "base", "img"))
    for script in named(path, "script"):
        assert "src" in script.attributes or script.attributes["type"] == "application/json"


@pytest.mark.parametrize("path", [path for path in PAGES if path.startswith("/docs/assets/")])
def test_an_asset_names_no_other_address(path: str) -> None:
    text = PAGES[path].body.decode()
    known = text.replace("http://www.w3.org/2000/svg", "")  # the name of a language, not a place
    assert not re.search(r"//[a-z0-9-]+\.[a-z]", known)
    assert "@import" not in text
    assert "url(" not in text
    assert not re.search(
        r"innerHTML|outerHTML|insertAdjacentHTML|document\.write|\beval\b|new Function", text
    )


@pytest.mark.parametrize("path", PAGES)
def test_a_page_is_served_with_its_policy_and_can_be_asked_for_again(client: TestClient, path: str) -> None:
    answer = client.get(path)
    assert answer.status_code == 200
    assert answer.content == PAGES[path].body
    assert answer.headers["content-type"] == PAGES[path].media_type
    assert answer.headers["cache-control"] == "no-cache"
    policy = answer.headers["content-security-policy"]
    assert "default-src 'none'" in policy
    assert "unsafe" not in policy
    assert "http" not in policy
    assert client.get(path, headers={"If-None-Match": answer.headers["etag"]}).status_code == 304
    assert client.head(path).status_code == 200
    assert client.post(path).status_code == 405


def test_only_the_page_with_the_form_may_run_a_script() -> None:
    scripted = {path for path in HTML if any("src" in script.attributes for script in named(path, "script"))}
    assert scripted == {"/docs/try"}
    allowed = {
        path for path in HTML if b"script-src" in dict(PAGES[path].headers)[b"content-security-policy"]
    }
    assert allowed == scripted


def test_every_page_is_reached_from_the_first() -> None:
    reached = ["/docs"]
    for path in reached:
        for link in named(path, "a"):
            where = link.attributes["href"].partition("#")[0]
            if where in HTML and where not in reached:
                reached.append(where)
    assert set(reached) == set(HTML)
    assert all(path in HTML for path, _ in LISTED)
    for path in HTML:
        assert [element.attributes["href"] for element in named(path, "a")][:2] == ["#content", "/docs"]


def test_a_slash_at_the_end_is_no_page(client: TestClient) -> None:
    assert client.get("/docs/").status_code == 404
    assert client.get("/docs/problems/no-such-problem").status_code == 404
