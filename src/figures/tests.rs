//! The list of figures and the figures themselves stay in step.

use super::*;
use std::collections::HashSet;

#[test]
fn every_value_has_its_pointer() {
    let figures = Figures {
        outputs: vec![OutputFigures {
            rails: vec![RailFigures::default(); 2],
            diodes: vec![DiodeFigures::default(); 4],
            capacitors: vec![CapacitorFigures::default(); 3],
            chokes: vec![ChokeFigures::default()],
            ..OutputFigures::default()
        }],
        line: LineFigures {
            harmonics: vec![0.0; 40],
            ..LineFigures::default()
        },
        efficiency: 0.5,
        ..Figures::default()
    };
    let (values, pointers) = (figures.values(), figures.pointers());
    assert_eq!(values.len(), pointers.len());
    let distinct: HashSet<&String> = pointers.iter().map(|(p, _)| p).collect();
    assert_eq!(distinct.len(), pointers.len());
    assert_eq!(
        (pointers.last().map(|p| p.0.as_str()), values.last()),
        (Some("/efficiency"), Some(&0.5))
    );
    assert!(distinct.contains(&"/outputs/0/rails/1/voltage/valley".to_owned()));
    assert!(distinct.contains(&"/line/harmonics/39".to_owned()));
}

#[test]
fn every_figure_of_the_list_is_told_apart_and_sourced() {
    let distinct: HashSet<&str> = CATALOGUE.iter().map(|f| f.pointer).collect();
    assert_eq!(distinct.len(), CATALOGUE.len());
    for figure in CATALOGUE {
        assert!(
            !figure.unit.is_empty() && figure.definition.len() > 5 && figure.source.len() > 5,
            "{figure:?}"
        );
    }
}
