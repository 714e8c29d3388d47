//! Verdicts of the forty-accessory build, as many as the first argument says: for a count of instructions.

mod forty;

use ampledger::catalog::Catalogs;
use ampledger::check::judge;
use ampledger::description::read;
use ampledger::resolve::resolve;

fn main() {
    let count: u32 = std::env::args()
        .find_map(|arg| arg.parse().ok())
        .unwrap_or(1);
    let (description, _) = read("bench", forty::forty().as_bytes()).expect("a build");
    let build = resolve(&description, &Catalogs::builtin()).expect("complete");
    for _ in 0..count {
        let judged = judge(std::hint::black_box(&build)).expect("a verdict");
        std::hint::black_box(judged.lacks());
    }
}
