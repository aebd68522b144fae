//! What an engineer does with the service, end to end.

use crate::{TestApp, supply};
use serde_json::{Value, json};

fn number(value: &Value, pointer: &str) -> f64 {
    value
        .pointer(pointer)
        .and_then(Value::as_f64)
        .unwrap_or_else(|| panic!("{pointer} in {value}"))
}

#[tokio::test]
async fn an_operating_point_balances_and_tells_its_limits() {
    let app = TestApp::new();
    let at = json!({"/line/voltage": "low", "/outputs/0/rails/0/load/output_current": "0.5 A"});
    let body = json!({"supply": supply(), "at": at, "waveforms": {"points": 101}});
    let answer = app.post("/v1/operating-point", &body).await.json();
    let figures = &answer["figures"];
    let load = number(figures, "/outputs/0/rails/0/power");
    let (line, losses) = (number(figures, "/line/active_power"), number(figures, "/losses/total"));
    assert!((line - load - losses).abs() < 1e-9 * line);
    assert!(
        (number(figures, "/outputs/0/rails/0/current/mean") - 0.505).abs() < 1e-9,
        "output and quiescent current"
    );
    assert_eq!(answer["waveforms"]["time"].as_array().unwrap().len(), 101);
    assert_eq!(answer["waveforms"]["diodes"].as_array().unwrap().len(), 4);
    assert!(number(&answer, "/solution/residual") < 1e-9);
    assert!(
        !answer["assumptions"].as_array().unwrap().is_empty() && !answer["cautions"].as_array().unwrap().is_empty()
    );
}

#[tokio::test]
async fn a_regulator_that_drops_out_is_called_out() {
    let app = TestApp::new();
    let mut body = json!({"supply": supply()});
    body["supply"]["outputs"][0]["rails"][0]["load"]["output_voltage"] = json!("23 V");
    let text = app.post("/v1/operating-point", &body).await.text();
    assert!(text.contains("drops out"), "{text}");
}

#[tokio::test]
async fn the_same_request_gives_the_same_bytes() {
    let body = json!({"supply": supply(), "policy": "mil-std-975m"});
    let first = TestApp::new().post("/v1/derating", &body).await.body;
    let second = TestApp::new().post("/v1/derating", &body).await.body;
    assert_eq!(first, second);
}

#[tokio::test]
async fn the_worst_case_is_attained_where_it_says() {
    let app = TestApp::new();
    let worst = app.post("/v1/worst-case", &json!({"supply": supply()})).await.json();
    assert_eq!(worst["coverage"]["corners"], 8);
    for figure in worst["figures"].as_array().unwrap().iter().step_by(7) {
        for (value, at) in [("minimum", "at_minimum"), ("maximum", "at_maximum")] {
            let point = app
                .post("/v1/operating-point", &json!({"supply": supply(), "at": figure[at]}))
                .await
                .json();
            let found = number(&point["figures"], figure["pointer"].as_str().unwrap());
            let expected = figure[value].as_f64().unwrap();
            assert!(
                (found - expected).abs() <= 1e-9 * expected.abs() + 1e-12,
                "{figure}: {found}"
            );
        }
    }
}

/// A load that may vanish is open at one of its ends: the rail rises to the crest there.
#[tokio::test]
async fn a_load_may_vanish_at_one_of_its_ends() {
    let app = TestApp::new();
    for (kind, load) in [
        ("current", json!({"kind": "current", "current": "1 A (0 A to 1 A)"})),
        (
            "regulator",
            json!({"kind": "regulator", "output_voltage": "15 V", "output_current": "1 A (0 A to 1 A)", "dropout": "1 V"}),
        ),
    ] {
        let mut body = json!({"supply": supply()});
        body["supply"]["outputs"][0]["rails"][0]["load"] = load;
        let worst = app.post("/v1/worst-case", &body).await;
        assert_eq!(worst.status, 200, "{kind}: {}", worst.text());
        let worst = worst.json();
        let valley = &worst["figures"][1];
        let crest = 253.0 / 230.0 * 20.5 * std::f64::consts::SQRT_2 - 2.0 * 0.78;
        let highest = valley["maximum"].as_f64().unwrap();
        // The core loss takes a little of it in the primary's resistance.
        assert!(
            highest < crest && highest > 0.997 * crest,
            "{kind}: {highest} for {crest}"
        );
        assert_eq!(worst["figures"][5]["minimum"], 0.0, "{}", worst["figures"][5]);
    }
}

#[tokio::test]
async fn derating_passes_fails_and_stays_incomplete() {
    let app = TestApp::new();
    let verdict = |supply: Value, policy: Value| {
        let app = &app;
        async move {
            let answer = app
                .post("/v1/derating", &json!({"supply": supply, "inline_policy": policy}))
                .await;
            assert_eq!(answer.status, 200, "{}", answer.text());
            answer.json()
        }
    };
    let rule = |component: &str, quantity: &str, factor: &str| json!({"component": component, "quantity": quantity, "factor": factor, "source": "house"});
    let policy = |rules: Vec<Value>| json!({"name": "house", "rules": rules});
    let pass = verdict(supply(), policy(vec![rule("capacitor", "voltage", "70 %")])).await;
    assert_eq!(pass["verdict"], "pass");
    assert_eq!(pass["checks"][0]["at"]["/line/voltage"], "high");
    assert_eq!(number(&pass, "/checks/0/allowed"), 35.0);
    let fail = verdict(supply(), policy(vec![rule("capacitor", "voltage", "50 %")])).await;
    assert_eq!(
        (&fail["verdict"], &fail["checks"][0]["verdict"]),
        (&json!("fail"), &json!("fail"))
    );
    let unrated = verdict(
        supply(),
        policy(vec![
            rule("diode", "current_rms", "70 %"),
            rule("capacitor", "voltage", "70 %"),
        ]),
    )
    .await;
    assert_eq!(
        (&unrated["verdict"], &unrated["checks"][0]["verdict"]),
        (&json!("incomplete"), &json!("unrated"))
    );
    assert!(unrated["checks"][0]["rating"].is_null() && unrated["checks"][0]["ratio"].is_null());
}

#[tokio::test]
async fn a_sweep_is_the_same_in_every_format() {
    let app = TestApp::new();
    let body = json!({
        "supply": supply(),
        "axes": [
            {"pointer": "/line/voltage", "values": ["207 V", "253 V"]},
            {"pointer": "/outputs/0/rails/0/filter/0/capacitor/capacitance", "from": "1 mF", "to": "10 mF", "points": 3, "scale": "log"}
        ],
        "columns": ["/line/voltage", "/outputs/0/rails/0/filter/0/capacitor/capacitance", "/outputs/0/rails/0/voltage/valley"]
    });
    let table = app.post("/v1/sweep", &body).await.json();
    assert_eq!((&table["points"], &table["unsolved"]), (&json!(6), &json!(0)));
    let rows = table["rows"].as_array().unwrap();
    let volts: Vec<f64> = rows.iter().map(|r| r[0].as_f64().unwrap()).collect();
    assert_eq!(
        volts,
        [207.0, 207.0, 207.0, 253.0, 253.0, 253.0],
        "the first axis varies slowest"
    );
    assert_eq!(rows[2][1], json!(0.01));
    let csv = app.post_for("/v1/sweep", &body, "text/csv").await.text();
    let mut lines = csv.split("\r\n");
    assert!(lines.next().unwrap().starts_with("/line/voltage [V],"));
    let lines_text = app.post_for("/v1/sweep", &body, "application/x-ndjson").await.text();
    let stream: Vec<Value> = lines_text.lines().map(|l| serde_json::from_str(l).unwrap()).collect();
    for (index, row) in rows.iter().enumerate() {
        let cells: Vec<f64> = lines.next().unwrap().split(',').map(|c| c.parse().unwrap()).collect();
        let numbers: Vec<f64> = row.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect();
        assert_eq!(cells, numbers);
        assert_eq!(&stream[index + 1], row);
    }
    assert_eq!(stream.last().unwrap()["points"], 6);
}

#[tokio::test]
async fn a_sweep_point_agrees_with_the_operating_point() {
    let app = TestApp::new();
    let body = json!({
        "supply": supply(),
        "axes": [{"pointer": "/line/voltage", "from": "207 V", "to": "253 V", "points": 5}],
        "columns": ["/outputs/0/rails/0/voltage/valley"]
    });
    let table = app.post("/v1/sweep", &body).await.json();
    let point = app
        .post(
            "/v1/operating-point",
            &json!({"supply": supply(), "at": {"/line/voltage": "high"}}),
        )
        .await
        .json();
    let (swept, solved) = (
        table["rows"][4][0].as_f64().unwrap(),
        number(&point["figures"], "/outputs/0/rails/0/voltage/valley"),
    );
    assert!((swept - solved).abs() < 1e-10 * solved, "{swept} {solved}");
}

#[tokio::test]
async fn random_draws_repeat_and_stay_within_the_bands() {
    let app = TestApp::new();
    let body = |seed: u64| {
        json!({"supply": supply(), "random": {"samples": 200, "seed": seed},
               "columns": ["/line/voltage", "/outputs/0/rails/0/voltage/valley"]})
    };
    let first = app.post("/v1/sweep", &body(7)).await;
    assert_eq!(first.body, app.post("/v1/sweep", &body(7)).await.body);
    assert_ne!(first.body, app.post("/v1/sweep", &body(8)).await.body);
    let worst = app.post("/v1/worst-case", &json!({"supply": supply()})).await.json();
    let valley = &worst["figures"][1];
    let table = first.json();
    let volts: Vec<f64> = table["rows"]
        .as_array()
        .unwrap()
        .iter()
        .map(|r| r[0].as_f64().unwrap())
        .collect();
    let mean = volts.iter().sum::<f64>() / 200.0;
    assert!(
        (mean - 230.0).abs() < 4.0 && volts.iter().all(|v| (207.0..=253.0).contains(v)),
        "{mean}"
    );
    for row in table["rows"].as_array().unwrap() {
        let v = row[1].as_f64().unwrap();
        assert!(v >= valley["minimum"].as_f64().unwrap() - 1e-9 && v <= valley["maximum"].as_f64().unwrap() + 1e-9);
    }
}

#[tokio::test]
async fn a_point_without_a_solution_is_a_row_of_nulls_and_counted() {
    let app = TestApp::new();
    let mut supply = json!({
        "line": {"voltage": "38 V", "frequency": "50 Hz", "resistance": "1 ohm"},
        "outputs": [{"rectifier": {"circuit": "bridge", "diode": {"threshold_voltage": "0.3 V", "slope_resistance": "0.2 ohm"}},
            "rails": [{"filter": [
                {"series": {"resistance": "8.282527141918306 ohm", "inductance": "0.3 H"}, "capacitor": {"capacitance": "30 mF", "esr": "0 ohm"}},
                {"series": {"inductance": "87.85978294286723 mH"}, "capacitor": {"capacitance": "25.077175763175963 uF", "esr": "0 ohm"}}]}]}]
    });
    supply["outputs"][0]["rails"][0]["load"] = json!({"kind": "regulator", "output_voltage": "11.94004245135174 V", "output_current": "1 A", "dropout": "0.2 V"});
    let body = json!({"supply": supply, "columns": ["/efficiency"],
        "axes": [{"pointer": "/outputs/0/rails/0/filter/1/capacitor/esr", "values": ["0 ohm", "10 ohm"]}]});
    let table = app.post("/v1/sweep", &body).await.json();
    assert_eq!(table["rows"][0], json!([null]));
    assert!(table["rows"][1][0].is_number());
    assert_eq!((&table["points"], &table["unsolved"]), (&json!(2), &json!(1)));
}

#[tokio::test]
async fn designs_hold_at_every_corner_and_say_who_asks() {
    let app = TestApp::new();
    let need = mainstay::api::examples::need();
    let answer = app.post("/v1/design", &need).await.json();
    let candidates = answer["candidates"].as_array().unwrap();
    assert_eq!(candidates.len(), 3);
    let scores: Vec<f64> = candidates.iter().map(|c| c["score"].as_f64().unwrap()).collect();
    assert!(scores.windows(2).all(|w| w[0] <= w[1]));
    for candidate in candidates {
        assert_eq!(candidate["verdict"], "pass");
        // The service itself confirms what the search claims, from the supply that it gave back.
        let worst = app
            .post("/v1/worst-case", &json!({"supply": candidate["supply"]}))
            .await
            .json();
        let find = |field: &str| {
            worst["figures"]
                .as_array()
                .unwrap()
                .iter()
                .find(|f| f["pointer"] == format!("/outputs/0/rails/0/voltage/{field}"))
                .cloned()
                .unwrap()
        };
        assert!(
            find("valley")["minimum"].as_f64().unwrap() >= 16.5 - 1e-9,
            "{}",
            find("valley")
        );
        assert!(find("crest")["maximum"].as_f64().unwrap() <= 35.0);
        let checks = app
            .post(
                "/v1/derating",
                &json!({"supply": candidate["supply"], "policy": "reliability-center-severe"}),
            )
            .await
            .json();
        assert_eq!(checks["verdict"], "pass");
        let quantities: Vec<&str> = candidate["picks"]
            .as_array()
            .unwrap()
            .iter()
            .map(|p| p["quantity"].as_str().unwrap())
            .collect();
        for wanted in [
            "open_circuit_voltage",
            "apparent_power",
            "regulation",
            "capacitance",
            "reverse_voltage",
            "current_mean",
            "current_rms",
            "current_surge",
            "voltage",
            "ripple_current",
            "fuse_current",
        ] {
            assert!(quantities.contains(&wanted), "{wanted} in {quantities:?}");
        }
        assert_eq!(candidate["picks"][0]["at"]["/line/voltage"], "low");
    }
    assert!(answer["assumed"]["regulation"].as_array().unwrap().len() >= 2);
}

#[tokio::test]
async fn an_impossible_need_says_what_stood_in_the_way() {
    let app = TestApp::new();
    let mut need = mainstay::api::examples::need();
    need["need"]["rails"][0]["crest_max"] = json!("17 V");
    let answer = app.post("/v1/design", &need).await.json();
    assert!(answer["candidates"].as_array().unwrap().is_empty());
    let rejected = answer["rejected"].as_array().unwrap();
    let crest = rejected.iter().find(|r| r["reason"] == "crest_max").unwrap();
    assert_eq!(crest["nearest"]["limit"], 17.0);
    assert!(crest["nearest"]["value"].as_f64().unwrap() > 17.0);
    let counted: u64 = rejected.iter().map(|r| r["count"].as_u64().unwrap()).sum();
    assert_eq!(counted, answer["considered"].as_u64().unwrap());
}

#[tokio::test]
async fn assumptions_of_a_design_can_be_overridden() {
    let app = TestApp::new();
    let mut need = mainstay::api::examples::need();
    need["assume"] = json!({"regulation": [{"rating": "10 VA", "regulation": "5 %"}], "loss_factor": "5 %", "capacitance_tolerance": "10 %"});
    let answer = app.post("/v1/design", &need).await.json();
    assert_eq!(
        answer["assumed"]["regulation"],
        json!([{"rating": "10 VA", "regulation": "5 %"}])
    );
    let supply = &answer["candidates"][0]["supply"];
    assert_eq!(supply["transformer"]["regulation"], "5 %");
    assert!(
        supply["outputs"][0]["rails"][0]["filter"][0]["capacitor"]["capacitance"]
            .as_str()
            .unwrap()
            .ends_with("±10 %")
    );
}

#[tokio::test]
async fn two_rails_from_a_split_bridge() {
    let app = TestApp::new();
    let rail = json!({"valley_min": "16 V", "load": {"kind": "current", "current": "0.5 A"}});
    let need = json!({"line": {"voltage": "230 V ±6 %", "frequency": "50 Hz"}, "need": {"rails": [rail, rail]}, "choose_from": "values", "minimise": "loss", "limit": 1});
    let answer = app.post("/v1/design", &need).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let candidate = &answer.json()["candidates"][0];
    assert_eq!(
        candidate["supply"]["outputs"][0]["rectifier"]["circuit"],
        "split-bridge"
    );
}

#[tokio::test]
async fn a_nameplate_is_derived_and_echoed() {
    let app = TestApp::new();
    let mut body = json!({"supply": supply()});
    body["supply"]["transformer"] = json!({"primary_voltage": "230 V", "regulation": "25 %", "windings": [{"rated_voltage": "18 V", "rated_current": "2 A"}]});
    let answer = app.post("/v1/operating-point", &body).await.json();
    // By hand: 18 V times 1.25; half of 25 % of 18 V at 2 A; the other half on the primary: 0.125/1.25 of 230 V at 2 A times 22.5/230.
    assert_eq!(number(&answer, "/derived/windings/0/open_circuit_voltage"), 22.5);
    assert!((number(&answer, "/derived/windings/0/resistance") - 1.125).abs() < 1e-12);
    let primary = 0.125 / 1.25 * 230.0 / (2.0 * 22.5 / 230.0);
    assert!((number(&answer, "/derived/primary_resistance") - primary).abs() < 1e-9 * primary);
}

#[tokio::test]
async fn a_plot_has_title_description_and_axes() {
    let app = TestApp::new();
    let answer = app
        .post_for("/v1/operating-point", &json!({"supply": supply()}), "image/svg+xml")
        .await;
    assert_eq!(answer.headers["content-type"], "image/svg+xml");
    let svg = answer.text();
    for part in [
        "role=\"img\"",
        "<title id=\"plot-title\">Kiln controller",
        "<desc id=\"plot-description\">Rail 0 lies between",
        "U/V",
        "I/A",
        "t/ms",
        "viewBox",
        "D1, D4",
    ] {
        assert!(svg.contains(part), "{part}");
    }
    assert!(!svg.contains("<script") && !svg.contains("style="));
}
