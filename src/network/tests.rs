//! Reductions of small networks against hand calculation.

use super::*;

fn oscillator() -> Oscillator {
    Oscillator {
        angular_frequency: 2.0,
        orders: vec![1],
    }
}

#[test]
fn a_capacitor_across_a_source_is_no_state_and_carries_its_derivative() {
    let mut builder = Builder::new(oscillator());
    let node = builder.node();
    builder.branch(Node::GROUND, node, Element::Emf(vec![-3.0, 0.0]));
    let capacitor = builder.branch(node, Node::GROUND, Element::Capacitor(0.5));
    let network = builder.finish(Probes::default());
    let pattern = Pattern::new(&network, 0).unwrap();
    assert_eq!(pattern.states, 0);
    // v = 3 sin 2t, i = C v' = 0.5 * 6 cos 2t.
    assert_eq!(
        pattern.voltage.row(capacitor).iter().copied().collect::<Vec<_>>(),
        [3.0, 0.0, 0.0]
    );
    assert_eq!(
        pattern.current.row(capacitor).iter().copied().collect::<Vec<_>>(),
        [0.0, 3.0, 0.0]
    );
}

#[test]
fn inductors_in_series_through_a_transformer_are_one_state() {
    let mut builder = Builder::new(oscillator());
    let core = builder.node();
    let turns = Some((core, 1.0));
    builder.series(
        Node::GROUND,
        Node::GROUND,
        turns,
        vec![Element::Emf(vec![-8.0, 0.0]), Element::Inductor(4.0)],
    );
    // Half the turns: an inductance of 1 H here counts as 4 H there.
    let secondary = builder.node();
    let laid = builder.series(
        Node::GROUND,
        secondary,
        Some((core, -0.5)),
        vec![Element::Inductor(1.0)],
    );
    let load = builder.branch(secondary, Node::GROUND, Element::Resistor(10.0));
    let network = builder.finish(Probes::default());
    let pattern = Pattern::new(&network, 0).unwrap();
    assert_eq!((pattern.states, pattern.voltages), (1, 0));
    // On the secondary: 4 V crest behind 1 H + 4 H / 4 = 2 H and 10 ohm: i' = (4 sin - 10 i) / 2, whichever inductor is the state.
    let scale = pattern.current[(laid[0], 0)];
    let row: Vec<f64> = (0..3).map(|c| scale * pattern.rate[(0, c)]).collect();
    assert!(
        (pattern.rate[(0, 0)] + 5.0).abs() < 1e-12 && (row[1] - 2.0).abs() < 1e-12,
        "{row:?}"
    );
    assert!((pattern.voltage[(load, 0)] - 10.0 * scale).abs() < 1e-12);
}

#[test]
fn equal_opens_share_a_floating_voltage_and_equal_shorts_a_current() {
    let switch = Element::Switch {
        threshold: 0.0,
        slope: 0.0,
    };
    let mut builder = Builder::new(oscillator());
    let (top, middle) = (builder.node(), builder.node());
    builder.branch(Node::GROUND, top, Element::Emf(vec![-6.0, 0.0]));
    let (one, other) = (
        builder.branch(top, middle, switch.clone()),
        builder.branch(middle, Node::GROUND, switch.clone()),
    );
    let network = builder.finish(Probes::default());
    let open = Pattern::new(&network, 0b00).unwrap();
    for branch in [one, other] {
        assert!((open.voltage[(branch, 0)] - 3.0).abs() < 1e-12);
    }
    assert_eq!(Pattern::new(&network, 0b11).unwrap_err(), Unsolvable::ShortedSource);
    let mut builder = Builder::new(oscillator());
    let node = builder.node();
    builder.branch(Node::GROUND, node, Element::CurrentSource(4.0));
    let pair = [
        builder.branch(node, Node::GROUND, switch.clone()),
        builder.branch(node, Node::GROUND, switch),
    ];
    let network = builder.finish(Probes::default());
    assert_eq!(Pattern::new(&network, 0b00).unwrap_err(), Unsolvable::BrokenCurrent);
    let closed = Pattern::new(&network, 0b11).unwrap();
    for branch in pair {
        assert!((closed.current[(branch, 2)] - 2.0).abs() < 1e-12);
    }
}

#[test]
fn charge_carries_over_where_capacitors_meet() {
    let mut builder = Builder::new(oscillator());
    let (a, b) = (builder.node(), builder.node());
    builder.branch(a, Node::GROUND, Element::Capacitor(1.0));
    builder.branch(b, Node::GROUND, Element::Capacitor(3.0));
    builder.branch(
        a,
        b,
        Element::Switch {
            threshold: 0.0,
            slope: 0.0,
        },
    );
    let network = builder.finish(Probes::default());
    let joined = Pattern::new(&network, 1).unwrap();
    assert_eq!(joined.states, 1);
    // 8 V on 1 F and 0 V on 3 F settle at 2 V.
    let settled = 8.0 * joined.contract[(0, 0)];
    assert!((settled - 2.0).abs() < 1e-12, "{settled}");
}
