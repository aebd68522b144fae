//! Every refusal is a problem that names its place, and all places at once.

use crate::{TestApp, supply};
use axum::body::Body;
use axum::http::{Request, header};
use mainstay::config::Limits;
use serde_json::{Value, json};

fn with(pointer: &str, value: Value) -> Value {
    let mut supply = supply();
    *supply.pointer_mut(pointer).unwrap_or_else(|| panic!("{pointer}")) = value;
    json!({"supply": supply})
}

async fn faults(app: &TestApp, body: &Value) -> Vec<String> {
    let answer = app.post("/v1/operating-point", body).await;
    assert_eq!(answer.status, 422, "{body}: {}", answer.text());
    answer.pointers()
}

#[tokio::test]
async fn one_fault_is_named_by_its_pointer() {
    let app = TestApp::new();
    let rows = [
        ("/line/voltage", json!(230)),
        ("/line/voltage", json!("230")),
        ("/line/voltage", json!("0,23 kV")),
        ("/line/voltage", json!("230 A")),
        ("/line/voltage", json!("-230 V")),
        ("/line/voltage", json!("230 V (240 V to 260 V)")),
        ("/line/voltage", json!("inf V")),
        ("/line/voltage", json!("NaN V")),
        ("/line/voltage", json!("1e999 V")),
        ("/line/voltage", Value::Null),
        ("/line/frequency", json!("0 Hz")),
        ("/outputs/0/rectifier/circuit", json!("bridges")),
        ("/outputs/0/rectifier/diode/threshold_voltage", json!("-0.7 V")),
        ("/outputs/0/rails/0/filter/0/capacitor/capacitance", json!("-4700 uF")),
        ("/outputs/0/rails/0/filter/0/capacitor/capacitance", json!("4700 µV")),
        ("/outputs/0/rails/0/filter/0/capacitor/esr", json!({"ohm": 1})),
        ("/outputs/0/rails/0/load/kind", json!("power")),
        ("/outputs/0/rails/0/load/output_current", json!("1")),
        ("/transformer/windings/0/resistance", json!("4k7 V")),
    ];
    for (pointer, value) in rows {
        assert_eq!(
            faults(&app, &with(pointer, value.clone())).await,
            [format!("#/supply{pointer}")],
            "{value}"
        );
    }
}

#[tokio::test]
async fn every_fault_is_named_at_once() {
    let app = TestApp::new();
    let mut body = json!({"supply": supply(), "att": {}, "waveforms": {"points": 1}});
    body["supply"]["line"]["voltage"] = json!(230);
    body["supply"]["line"]["volatge"] = json!("230 V");
    body["supply"]["line"]["resistance"] = json!("x");
    body["supply"]["outputs"][0]["rails"][0]["load"] = json!({"kind": "current", "amps": "1 A"});
    body["supply"]["outputs"][0]["rectifier"]["diode"]["slope_resistance"] = json!("12 mH");
    let mut found = faults(&app, &body).await;
    found.sort();
    let mut expected = [
        "#/att",
        "#/waveforms/points",
        "#/supply/line/voltage",
        "#/supply/line/volatge",
        "#/supply/line/resistance",
        "#/supply/outputs/0/rails/0/load/current",
        "#/supply/outputs/0/rails/0/load/amps",
        "#/supply/outputs/0/rectifier/diode/slope_resistance",
    ];
    expected.sort_unstable();
    assert_eq!(found, expected);
    let text = app.post("/v1/operating-point", &body).await.text();
    assert!(text.contains("did you mean voltage?"), "{text}");
}

#[tokio::test]
async fn rules_between_parts_are_checked() {
    let app = TestApp::new();
    let cases = [
        (
            "/outputs/0/rectifier/circuit",
            json!("three-phase-bridge"),
            "#/supply/outputs/0/rectifier/circuit",
        ),
        (
            "/outputs/0/rectifier/circuit",
            json!("full-wave-doubler"),
            "#/supply/outputs/0/rectifier/stack",
        ),
        (
            "/outputs/0/rectifier/circuit",
            json!("split-bridge"),
            "#/supply/outputs/0/rails",
        ),
        ("/transformer/windings", json!([]), "#/supply/transformer/windings"),
        ("/outputs", json!([]), "#/supply/outputs"),
    ];
    for (pointer, value, expected) in cases {
        let found = faults(&app, &with(pointer, value)).await;
        assert!(found.iter().any(|f| f == expected), "{pointer}: {found:?}");
    }
    let mut body = json!({"supply": supply()});
    body["supply"]["outputs"][0]["winding"] = json!(3);
    assert_eq!(faults(&app, &body).await, ["#/supply/outputs/0/winding"]);
}

#[tokio::test]
async fn duplicate_keys_and_wrong_choices_are_faults() {
    let app = TestApp::new();
    let text = json!({"supply": supply()}).to_string().replacen(
        "\"frequency\":\"50 Hz\"",
        "\"frequency\":\"50 Hz\",\"frequency\":\"60 Hz\"",
        1,
    );
    let request = Request::post("/v1/operating-point")
        .header(header::CONTENT_TYPE, "application/json")
        .body(Body::from(text));
    let answer = app.send(request.unwrap()).await;
    assert_eq!(
        (answer.status.as_u16(), answer.pointers()),
        (422, vec!["#/supply/line/frequency".to_owned()])
    );
    let rows = [
        (json!({"/line/voltage": "lowest"}), "#/at/~1line~1voltage"),
        (json!({"/line/voltage": "300 V"}), "#/at/~1line~1voltage"),
        (json!({"/line/voltage": "220 A"}), "#/at/~1line~1voltage"),
        (json!({"/line/volts": "low"}), "#/at/~1line~1volts"),
        (json!(["low"]), "#/at"),
    ];
    for (at, expected) in rows {
        assert_eq!(faults(&app, &json!({"supply": supply(), "at": at})).await, [expected]);
    }
}

#[tokio::test]
async fn the_frameworks_own_refusals_are_problems_too() {
    let app = TestApp::new();
    let post = |body: &str, kind: Option<&str>| {
        let mut request = Request::post("/v1/operating-point");
        if let Some(kind) = kind {
            request = request.header(header::CONTENT_TYPE, kind);
        }
        request.body(Body::from(body.to_owned())).unwrap()
    };
    let json_type = Some("application/json");
    let deep = format!("{}1{}", "[".repeat(40), "]".repeat(40));
    let very_deep = "[".repeat(100_000);
    let rows = [
        (post("{", json_type), 400),
        (post("", json_type), 400),
        (post("{\"supply\": 1e999}", json_type), 400),
        (post("{\"supply\": NaN}", json_type), 400),
        (post(&deep, json_type), 400),
        (post(&very_deep, json_type), 400),
        (post("[]", json_type), 422),
        (post("\"text\"", json_type), 422),
        (post("{}", json_type), 422),
        (post("{}", None), 415),
        (post("{}", Some("text/plain")), 415),
        (Request::get("/nope").body(Body::empty()).unwrap(), 404),
        (Request::get("/v1/policies/none").body(Body::empty()).unwrap(), 404),
        (
            Request::get("/static/..%2fCargo.toml").body(Body::empty()).unwrap(),
            404,
        ),
        (Request::get("/problems/none").body(Body::empty()).unwrap(), 404),
        (Request::get("/v1/operating-point").body(Body::empty()).unwrap(), 405),
        (Request::put("/v1/figures").body(Body::empty()).unwrap(), 405),
        (Request::delete("/livez").body(Body::empty()).unwrap(), 405),
    ];
    for (request, status) in rows {
        let line = format!("{} {}", request.method(), request.uri());
        let answer = app.send(request).await;
        assert_eq!(answer.status.as_u16(), status, "{line}: {}", answer.text());
        assert_eq!(status == 405, answer.headers.contains_key(header::ALLOW), "{line}");
    }
}

#[tokio::test]
async fn bounds_are_kept_and_named() {
    let app = TestApp::with(Limits {
        body_maximum: 4096,
        sweep_points_maximum: 100,
        sweep_columns_maximum: 2,
        bands_maximum: 2,
        ..Limits::default()
    });
    let large = json!({"supply": supply(), "filler": "x".repeat(5000)});
    assert_eq!(app.post("/v1/operating-point", &large).await.status, 413);
    let sweep = |axes: Value, columns: Value| json!({"supply": supply(), "axes": axes, "columns": columns});
    let axis = |points: u64| json!([{"pointer": "/line/voltage", "from": "207 V", "to": "253 V", "points": points}]);
    let answer = app.post("/v1/sweep", &sweep(axis(101), json!(["/efficiency"]))).await;
    assert_eq!(
        (answer.status.as_u16(), answer.pointers()),
        (422, vec!["#/axes".to_owned()])
    );
    assert!(answer.text().contains("--sweep-points-maximum"));
    let answer = app
        .post(
            "/v1/sweep",
            &sweep(axis(3), json!(["/efficiency", "/efficiency", "/efficiency"])),
        )
        .await;
    assert_eq!(answer.pointers(), ["#/columns"]);
    let answer = app.post("/v1/worst-case", &json!({"supply": supply()})).await;
    assert_eq!(
        (answer.status.as_u16(), answer.pointers()),
        (422, vec!["#/supply".to_owned()])
    );
}

#[tokio::test]
async fn sweeps_refuse_what_they_cannot_do() {
    let app = TestApp::new();
    let columns = json!(["/efficiency"]);
    let rows = [
        (json!({"supply": supply(), "columns": columns}), vec!["#/axes"]),
        (
            json!({"supply": supply(), "columns": columns, "axes": [], "random": {"samples": 1, "seed": 1}}),
            vec!["#/random"],
        ),
        (
            json!({"supply": supply(), "columns": ["/efficiencies", "/line/voltage"], "axes": [{"pointer": "/line/frequency", "values": ["50 Hz"]}]}),
            vec!["#/columns/0", "#/columns/1"],
        ),
        (
            json!({"supply": supply(), "columns": columns, "axes": [{"pointer": "/line/volts", "values": ["50 Hz"]}]}),
            vec!["#/axes/0/pointer"],
        ),
        (
            json!({"supply": supply(), "columns": columns, "axes": [{"pointer": "/line/voltage", "values": ["50 Hz", 230]}]}),
            vec!["#/axes/0/values/0", "#/axes/0/values/1"],
        ),
        (
            json!({"supply": supply(), "columns": columns, "axes": [{"pointer": "/line/voltage", "from": "0 V", "to": "230 V", "points": 3}]}),
            vec!["#/axes/0/from"],
        ),
        (
            json!({"supply": supply(), "columns": columns, "axes": [{"pointer": "/line/voltage", "from": "200 V"}]}),
            vec!["#/axes/0"],
        ),
    ];
    for (body, expected) in rows {
        let answer = app.post("/v1/sweep", &body).await;
        let expected: Vec<String> = expected.into_iter().map(str::to_owned).collect();
        assert_eq!((answer.status.as_u16(), answer.pointers()), (422, expected), "{body}");
    }
    let body =
        json!({"supply": supply(), "columns": columns, "axes": [{"pointer": "/line/voltage", "values": ["230 V"]}]});
    assert_eq!(app.post_for("/v1/sweep", &body, "image/png").await.status, 406);
    assert_eq!(
        app.post_for("/v1/operating-point", &json!({"supply": supply()}), "image/png")
            .await
            .status,
        406
    );
}

#[tokio::test]
async fn a_circuit_without_a_solution_says_why() {
    // An ideal source through ideal diodes onto an undamped filter at its resonance, fed by a current alone.
    let app = TestApp::new();
    let body = json!({"supply": {
        "line": {"voltage": "38 V", "frequency": "50 Hz", "resistance": "1 ohm"},
        "outputs": [{"rectifier": {"circuit": "bridge", "diode": {"threshold_voltage": "0.3 V", "slope_resistance": "0.2 ohm"}},
            "rails": [{"filter": [
                {"series": {"resistance": "8.282527141918306 ohm", "inductance": "0.3 H"}, "capacitor": {"capacitance": "30 mF", "esr": "0 ohm"}},
                {"series": {"inductance": "87.85978294286723 mH"}, "capacitor": {"capacitance": "25.077175763175963 uF", "esr": "0 ohm"}}],
              "load": {"kind": "regulator", "output_voltage": "11.94004245135174 V", "output_current": "1 A", "dropout": "0.2 V"}}]}]
    }});
    let answer = app.post("/v1/operating-point", &body).await;
    assert_eq!(answer.status, 422, "{}", answer.text());
    let problem = answer.json();
    assert!(problem["type"].as_str().unwrap().ends_with("/no-solution"));
    assert!(
        problem["detail"].as_str().unwrap().contains("no periodic state"),
        "{problem}"
    );
}
