//! Changes that keep a request JSON: numbers are scaled, units and words exchanged, members added, removed, repeated.

use fastrand::Rng;

use crate::grammar::{GRAMMAR, Grammar, number};
use crate::input::Input;
use crate::tree::Node;

/// Another request made of one, no longer than `room`; none if the bytes are no request.
pub fn mutated(bytes: &[u8], room: usize, seed: u32) -> Option<Vec<u8>> {
    let mut rng = Rng::with_seed(u64::from(seed));
    let grammar = &*GRAMMAR;
    let mut input = Input::read(bytes)?;
    if rng.u8(0..64) == 0 {
        input.path.clone_from(&rng.choice(&grammar.endpoints)?.path);
    }
    if rng.u8(0..32) == 0 {
        rng.choice(grammar.endpoint(&input.path)?.forms())?.clone_into(&mut input.accept);
    }
    let takes_lines = grammar.endpoint(&input.path)?.takes_lines();
    let mut documents = input.documents(takes_lines)?;
    if takes_lines && rng.u8(0..4) == 0 {
        change_lines(&mut documents, &mut rng);
    }
    let chosen = rng.usize(0..documents.len().max(1));
    if let Some(document) = documents.get_mut(chosen) {
        if rng.u8(0..128) == 0 {
            *document = grammar.instance(grammar.endpoint(&input.path)?.request(), &mut rng, 0);
        }
        for _ in 0..1 << rng.u8(0..3) {
            change(document, grammar, &mut rng);
        }
    }
    let bytes = input.with(&documents);
    (bytes.len() <= room).then_some(bytes)
}

fn change_lines(documents: &mut Vec<Node>, rng: &mut Rng) {
    let place = rng.usize(0..=documents.len());
    if place < documents.len() && rng.bool() {
        documents.remove(place);
    } else if let Some((_, seed)) = rng.choice(&GRAMMAR.seeds) {
        documents.insert(place, seed.clone());
    }
}

/// Changes one part, chosen at random.
fn change(document: &mut Node, grammar: &Grammar, rng: &mut Rng) {
    let mut index = rng.usize(0..document.count());
    let Some((name, part)) = document.part(&mut index, "") else { return };
    if rng.u8(0..12) == 0 {
        *part = stranger(name, part, grammar, rng);
        return;
    }
    match part {
        Node::Leaf(text) => *text = leaf(text, grammar, rng),
        Node::List(items) => list(items, rng),
        Node::Object(members) => object(members, grammar, rng),
    }
}

/// Something else in the place of a part.
fn stranger(name: &str, part: &Node, grammar: &Grammar, rng: &mut Rng) -> Node {
    let donor = grammar.donors.get(name).and_then(|donors| rng.choice(donors));
    match rng.u8(0..8) {
        0 => Node::Leaf("null".to_owned()),
        1 => Node::List(vec![part.clone()]),
        2 => Node::Object(vec![(name.to_owned(), part.clone())]),
        3 => rng.choice(&grammar.seeds).map_or(part.clone(), |(_, seed)| seed.clone()),
        _ => donor.unwrap_or(part).clone(),
    }
}

fn leaf(text: &str, grammar: &Grammar, rng: &mut Rng) -> String {
    let word = |rng: &mut Rng| {
        let word = rng.choice(&grammar.words).map_or("", String::as_str);
        serde_json::Value::from(word).to_string()
    };
    match text.parse::<f64>() {
        Ok(value) => match rng.u8(0..10) {
            0 => number(rng),
            1 => format!("{}", -value),
            2 => format!("{}", value * (1.0 + f64::EPSILON)),
            3 => format!("{}", value + 1.0),
            4 => format!("{}", value - 1.0),
            5 => format!("{:e}", value * 10_f64.powi(rng.i32(-12..=12))),
            6 => format!("{}", value.round()),
            7 => word(rng),
            _ => format!("{}", value * 10_f64.powf(rng.f64() * 2.0 - 1.0)),
        },
        Err(_) if text == "true" || text == "false" => (text != "true").to_string(),
        Err(_) => {
            if rng.u8(0..16) == 0 {
                number(rng)
            } else {
                word(rng)
            }
        }
    }
}

fn list(items: &mut Vec<Node>, rng: &mut Rng) {
    let Some(place) = rng.choice(0..items.len()) else { return };
    match rng.u8(0..6) {
        0 => drop(items.remove(place)),
        1 => items.reverse(),
        2 => items.clear(),
        3 => items.rotate_left(place),
        // Up to many: what is counted must be bounded.
        4 => {
            let copy = items[place].clone();
            items.extend(std::iter::repeat_n(copy, 1 << rng.u8(0..8)));
        }
        _ => items.insert(place, items[place].clone()),
    }
}

fn object(members: &mut Vec<(String, Node)>, grammar: &Grammar, rng: &mut Rng) {
    let names: Vec<&str> = members.iter().map(|(name, _)| name.as_str()).collect();
    let further = grammar.further_member(&names, rng);
    let place = rng.choice(0..members.len());
    match (rng.u8(0..8), further, place) {
        (0, _, Some(place)) | (1, None, Some(place)) => drop(members.remove(place)),
        (2, _, Some(place)) if rng.u8(0..4) == 0 => members.push(members[place].clone()),
        (2, _, Some(place)) if rng.u8(0..4) == 0 => {
            let names: Vec<&String> = grammar.donors.keys().collect();
            rng.choice(names).unwrap_or(&String::new()).clone_into(&mut members[place].0);
        }
        (_, Some(further), _) => members.push(further),
        (_, None, _) => {}
    }
}
