//! Fuzzes the bodies of every `POST` through the whole service, in process and guided by coverage. See `../run`.
#![no_main]

mod check;
mod grammar;
mod input;
mod mutate;
mod tree;

use std::fs;
use std::path::Path;

use libfuzzer_sys::{Corpus, fuzz_mutator, fuzz_target, fuzzer_mutate};

use grammar::GRAMMAR;

/// Of so many mutations one is blind: any byte may change then.
const BLIND: u32 = 32;

fuzz_target!(
    init: write_seeds(),
    |bytes: &[u8]| -> Corpus {
        if check::check(bytes) { Corpus::Keep } else { Corpus::Reject }
    }
);

fuzz_mutator!(|data: &mut [u8], size: usize, max_size: usize, seed: u32| {
    let mutated =
        if seed % BLIND == 0 { None } else { mutate::mutated(&data[..size], max_size, seed) };
    match mutated {
        Some(bytes) => {
            data[..bytes.len()].copy_from_slice(&bytes);
            bytes.len()
        }
        None => fuzzer_mutate(data, size, max_size),
    }
});

/// Writes the requests to start from into the folder that `FUZZ_SEEDS` names.
fn write_seeds() {
    let Some(folder) = std::env::var_os("FUZZ_SEEDS") else { return };
    let folder = Path::new(&folder);
    for (index, (path, seed)) in GRAMMAR.seeds.iter().enumerate() {
        let Some(endpoint) = GRAMMAR.endpoint(path) else { continue };
        for (form, accept) in endpoint.forms().into_iter().enumerate() {
            let bytes = input::bytes(path, accept, std::slice::from_ref(seed));
            fs::write(folder.join(format!("seed-{index}-{form}")), bytes)
                .expect("a folder for seeds");
        }
    }
}
