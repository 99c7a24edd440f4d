//! The same drawings read by an independent reader of SVG (a dev-dependency that draws pictures): area
//! and box of what both saw agree. It flattens arcs and works in single precision, hence the allowance;
//! the fine figures are checked beside the reader itself.

use resvg::tiny_skia::{PathSegment, Point};
use resvg::usvg::{Group, Node, Options, Tree};
use sweptedge::geometry::Rect;
use sweptedge::input::drawing::DrawingOptions;
use sweptedge::input::drawing::svg::read_subpaths;

/// Area (positive clockwise on the screen) and box of every filled subpath under a group, in px.
fn seen(group: &Group, area: &mut f64, bounds: &mut Option<Rect>) {
    for node in group.children() {
        match node {
            Node::Group(inner) => seen(inner, area, bounds),
            Node::Path(path) => {
                // A path lost here would show as a difference of area.
                let Some(data) = path.data().clone().transform(path.abs_transform()) else { continue };
                let q = |p: Point| kurbo::Point::new(f64::from(p.x), f64::from(p.y));
                let mut outline = kurbo::BezPath::new();
                for s in data.segments() {
                    match s {
                        PathSegment::MoveTo(p) => {
                            // Area is of closed loops; an open one counts with its closing chord.
                            if !outline.elements().is_empty() {
                                outline.close_path();
                            }
                            outline.move_to(q(p));
                        }
                        PathSegment::LineTo(p) => outline.line_to(q(p)),
                        PathSegment::QuadTo(c, p) => outline.quad_to(q(c), q(p)),
                        PathSegment::CubicTo(c, d, p) => outline.curve_to(q(c), q(d), q(p)),
                        PathSegment::Close => outline.close_path(),
                    }
                }
                outline.close_path();
                *area += kurbo::Shape::area(&outline);
                let b = kurbo::Shape::bounding_box(&outline);
                *bounds = Some(bounds.map_or(b, |a| a.union(b)));
            }
            Node::Image(_) | Node::Text(_) => {}
        }
    }
}

const DRAWINGS: [&str; 9] = [
    "<rect x='100' y='200' width='300' height='400' rx='50' ry='80'/><circle cx='700' cy='300' r='150'/>",
    "<g transform='translate(300,200) rotate(30 40 50)'><ellipse cx='100' cy='80' rx='90' ry='30'/></g>",
    "<g transform='skewX(20)'><g transform='scale(2 .5)'><circle cx='150' cy='900' r='100'/></g></g>",
    "<path d='M200 200a120 60 30 1 0 150 90L500 700A200 100-40 01300 800z m300 50q80 90 200-30t100 200s-200 50-90-90z'/>",
    "<path d='M100 100 h400 v300 c-50 200-150 100-200 0 S200 300 150 500z'/><polygon points='600,600 900,650 700,900'/>",
    "<g transform='matrix(.5 .2 -.3 .9 250 20)'><path d='M300 300A150 150 0 11299 300z'/></g>",
    "<svg x='100' y='50' width='500' height='700' viewBox='10 20 100 100' preserveAspectRatio='xMaxYMin slice'>\
     <circle cx='60' cy='70' r='30'/></svg>",
    "<defs><g id='t'><circle r='60'/><rect x='80' width='50' height='90'/></g></defs>\
     <use href='#t' x='300' y='400'/><use href='#t' transform='translate(600 600) scale(2) rotate(70)'/>",
    "<g transform='scale(-1 1) translate(-900 0)'><path d='M100 400A200 300 10 00500 500 200 300 10 00100 400'/></g>",
];

#[test]
fn an_independent_reader_sees_the_same_area_and_box() {
    let pages = [
        ("width='1000' height='1000' viewBox='0 0 1000 1000'", 1.0),
        ("width='1000' height='1000'", 1.0),
        ("width='254mm' height='127mm' viewBox='0 0 1000 1000'", 25.4 / 96.0),
        ("width='10in' height='5in' viewBox='100 50 900 800' preserveAspectRatio='none'", 1.0 / 96.0),
        ("width='30cm' viewBox='0 0 1000 1000'", 25.4 / 96.0),
    ];
    for (page, px) in pages {
        for drawing in DRAWINGS {
            let text = format!("<svg xmlns='http://www.w3.org/2000/svg' {page}>{drawing}</svg>");
            let ours = read_subpaths(text.as_bytes(), "o.svg", &DrawingOptions::default())
                .unwrap_or_else(|p| panic!("{text}: {p:?}"));
            let tree = Tree::from_str(&text, &Options::default()).unwrap();
            let (mut area, mut bounds) = (0.0, None);
            seen(tree.root(), &mut area, &mut bounds);
            let bounds = bounds.unwrap();
            let mine: f64 = ours.value.contour.paths().iter().map(|p| -p.signed_area()).sum();
            let theirs = area * px * px;
            assert!((mine - theirs).abs() < 2e-3 * theirs.abs(), "{text}: area {mine}, not {theirs}");
            let height = f64::from(tree.size().height());
            let b = ours.value.contour.bounds();
            let box_of = [bounds.x0, height - bounds.y1, bounds.x1, height - bounds.y0].map(|v| v * px);
            for (found, wanted) in [b.x0, b.y0, b.x1, b.y1].iter().zip(box_of) {
                assert!((found - wanted).abs() < 0.2 * px, "{text}: box {b:?}, not {box_of:?}");
            }
        }
    }
}
