//! Which layers of a DXF drawing are taken, and what to say when one does not exist.

use std::collections::HashMap;

use super::scan::Scan;
use crate::input::drawing::{DrawingOptions, Layer};
use crate::input::{Place, Problem, Refusal};

/// Most names put into one message.
const LISTED: usize = 12;

/// All layers of the drawing, in the order of their first mention, with those taken marked. Names
/// agree whatever their case, as in the format.
///
/// # Errors
/// A layer is asked for that does not exist.
pub(super) fn choose(
    scan: &Scan<'_>,
    file: &str,
    options: &DrawingOptions,
    problems: &mut Vec<Problem>,
) -> Result<Vec<Layer>, Refusal> {
    let mut layers: Vec<Layer> = Vec::new();
    let mut places: HashMap<String, usize> = HashMap::new();
    let mut place_of = |name: &str, layers: &mut Vec<Layer>| {
        *places.entry(name.to_lowercase()).or_insert_with(|| {
            layers.push(Layer { name: name.to_owned(), entities: 0, taken: false });
            layers.len() - 1
        })
    };
    for row in &scan.layers {
        place_of(&row.name, &mut layers);
    }
    for entity in &scan.entities {
        let at = place_of(&entity.layer, &mut layers);
        if let Some(layer) = layers.get_mut(at) {
            layer.entities += 1;
        }
    }
    let missing: Refusal = options
        .layers
        .iter()
        .filter(|asked| !layers.iter().any(|l| same(&l.name, asked)))
        .map(|asked| no_such_layer(asked, &layers, file))
        .collect();
    if !missing.is_empty() {
        return Err(missing);
    }
    for layer in &mut layers {
        layer.taken = options.layers.is_empty() || options.layers.iter().any(|a| same(&layer.name, a));
    }
    tell_hidden(scan, &layers, file, problems);
    Ok(layers)
}

fn same(a: &str, b: &str) -> bool {
    a == b || a.to_lowercase() == b.to_lowercase()
}

/// Is this layer among those taken?
pub(super) fn is_taken(layers: &[Layer], name: &str) -> bool {
    layers.iter().any(|l| l.taken && same(&l.name, name))
}

fn no_such_layer(asked: &str, layers: &[Layer], file: &str) -> Problem {
    let wanted = asked.to_lowercase();
    let nearest = layers.iter().min_by_key(|l| strsim::damerau_levenshtein(&l.name.to_lowercase(), &wanted));
    let help = match nearest {
        Some(l) => format!("did you mean {:?}? There are: {}", l.name, names(layers)),
        None => "the drawing has no layers at all; leave --layer out".into(),
    };
    Problem::error(
        Place::file(file),
        format!("there is no layer {asked:?} in the drawing"),
        "the name of a layer in the drawing",
        help,
    )
}

/// The refusal for a drawing whose taken layers hold no contour.
pub(super) fn nothing_read(layers: &[Layer], file: &str) -> Refusal {
    let counts: Vec<String> =
        layers.iter().take(LISTED).map(|l| format!("{} ({} entities)", l.name, l.entities)).collect();
    let on = if counts.is_empty() { "the drawing is empty".into() } else { counts.join(", ") };
    vec![Problem::error(
        Place::file(file),
        "no line, arc, circle or polyline was found on the layers taken",
        "a contour drawn with lines, arcs, circles or polylines",
        format!("take the layer that holds the contour (--layer); layers: {on}"),
    )]
}

fn names(layers: &[Layer]) -> String {
    let mut text = layers.iter().take(LISTED).map(|l| l.name.as_str()).collect::<Vec<_>>().join(", ");
    if layers.len() > LISTED {
        text.push_str(&format!(" and {} more", layers.len() - LISTED));
    }
    text
}

/// Layers that are read although the drawing hides them: the user does not see them on the screen.
fn tell_hidden(scan: &Scan<'_>, layers: &[Layer], file: &str, problems: &mut Vec<Problem>) {
    let hidden: Vec<&str> = scan
        .layers
        .iter()
        .filter(|row| row.off)
        .filter(|row| layers.iter().any(|l| l.taken && l.entities > 0 && same(&l.name, &row.name)))
        .map(|row| row.name.as_str())
        .take(LISTED)
        .collect();
    if !hidden.is_empty() {
        problems.push(Problem::warning(
            Place::file(file),
            format!("layers switched off or frozen in the drawing were read: {}", hidden.join(", ")),
            "",
            "nothing if they belong to the contour; else name the layers to take (--layer)",
        ));
    }
}
