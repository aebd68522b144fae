"""Works with a client generated from the description: what it was told, it can do.

Usage: use_client.py FOLDER URL
FOLDER holds the generated package, URL is the address of a running service.
"""

import importlib
import json
import pathlib
import pkgutil
import sys


def modules(folder):
    """Imports every module of the generated package: none may be broken."""
    sys.path.insert(0, str(folder))
    package = importlib.import_module("mainstay_client")
    names = [m.name for m in pkgutil.walk_packages(package.__path__, "mainstay_client.")]
    for name in names:
        importlib.import_module(name)
    return names


def example(document, path):
    """The request that the description gives as its example."""
    return document["paths"][path]["post"]["requestBody"]["content"]["application/json"]["example"]


def main():
    folder, url = pathlib.Path(sys.argv[1]).resolve(), sys.argv[2]
    names = modules(folder)
    assert len(names) > 60, f"only {len(names)} modules were generated"

    from mainstay_client import Client
    from mainstay_client.api.reference import get_policy, list_figures, list_policies
    from mainstay_client.api.service import get_livez, get_readyz
    from mainstay_client.api.supply import check_derating, design_supply, find_worst_case, solve_operating_point
    from mainstay_client import models

    client = Client(base_url=url, raise_on_unexpected_status=True)
    document = client.get_httpx_client().get("/openapi.json").json()

    assert get_livez.sync(client=client).status == "ok"
    assert get_readyz.sync(client=client).status == "ok"

    figures = list_figures.sync(client=client)
    assert all(f.pointer.startswith("/") and f.unit is not None for f in figures.figures)
    policies = list_policies.sync(client=client).policies
    assert get_policy.sync(policies[0].name, client=client) == policies[0]
    unknown = get_policy.sync("no-such-policy", client=client)
    assert isinstance(unknown, models.Problem) and unknown.status == 404, unknown

    # Every operation takes its example as typed values, and its answer holds in the types and out of them.
    for path, call, request, answer in [
        ("/v1/operating-point", solve_operating_point, models.OperatingPointRequest, models.OperatingPointAnswer),
        ("/v1/worst-case", find_worst_case, models.WorstCaseRequest, models.WorstCaseAnswer),
        ("/v1/derating", check_derating, models.DeratingRequest, models.DeratingAnswer),
        ("/v1/design", design_supply, models.DesignRequest, models.DesignAnswer),
    ]:
        given = example(document, path)
        body = request.from_dict(given)
        assert body.to_dict() == given, f"{path}: the example changes on its way through the types"
        got = call.sync_detailed(client=client, body=body)
        assert isinstance(got.parsed, answer), f"{path}: {got.status_code} {got.content[:300]}"
        assert got.parsed.to_dict() == json.loads(got.content), f"{path}: the answer has more than its type"

    # A fault comes back as a typed problem with its pointer.
    faulty = example(document, "/v1/operating-point")
    faulty["supply"]["line"]["voltage"] = "230"
    problem = solve_operating_point.sync(client=client, body=models.OperatingPointRequest.from_dict(faulty))
    assert isinstance(problem, models.Problem) and problem.type_ == "/problems/invalid-request", problem
    assert [e.pointer for e in problem.errors] == ["#/supply/line/voltage"], problem

    print(f"{len(names)} modules imported; health, figures, policies, 4 operations and a fault passed through their types")


if __name__ == "__main__":
    main()
