//! Times `choose` on generated catalogues, records already loaded: one line an instance with its
//! status, total, gap and seconds. `cargo bench --bench choose -- SIZE OUTPUTS METHOD SEEDS LIMIT`,
//! such as `-- S 20 rss 5 60`; without arguments a short set.

mod generated;

use std::io::Write;
use std::time::{Duration, Instant};

use ampthrift::answers::{Options, choose};
use ampthrift::request::Budget;

fn main() -> std::io::Result<()> {
    let mut out = std::io::stdout().lock();
    // Cargo adds a flag of its own.
    let given: Vec<String> = std::env::args().skip(1).filter(|a| a != "--bench").collect();
    let number = |text: &str| text.parse::<u64>().unwrap_or(1);
    if let [size, outputs, method, seeds, limit] = given.as_slice() {
        let size = match size.as_str() {
            "M" => generated::M,
            "L" => generated::L,
            _ => generated::S,
        };
        let method = if method == "rss" { Budget::Rss } else { Budget::WorstCase };
        return series(&mut out, size, number(outputs), method, number(seeds), number(limit));
    }
    for outputs in [1, 5] {
        for method in [Budget::WorstCase, Budget::Rss] {
            series(&mut out, generated::S, outputs, method, 3, 60)?;
        }
    }
    Ok(())
}

fn series(
    out: &mut impl Write,
    size: generated::Size,
    outputs: u64,
    method: Budget,
    seeds: u64,
    limit: u64,
) -> std::io::Result<()> {
    for seed in 0..seeds {
        let catalog = generated::catalog(size, seed);
        let request = generated::request(outputs as usize, method, seed);
        let options =
            Options { time_limit: Some(Duration::from_secs(limit)), ..Options::default() };
        let start = Instant::now();
        let answer = choose(&catalog, &request, &options);
        let seconds = start.elapsed().as_secs_f64();
        let (name, method) = (size.name, method.word());
        match answer {
            Ok(choice) => {
                let (total, gap) = choice.totals.map_or((0.0, 0.0), |(total, bound)| {
                    let (total, bound) = (total.micros() as f64, bound.micros() as f64);
                    (total / 1e6, (total - bound) / total * 100.0)
                });
                let status = choice.status.word();
                writeln!(
                    out,
                    "{name} {outputs:>3} {method:<10} seed {seed}: {status:<10} {total:>12.2} \
                     gap {gap:>6.3} % {seconds:>8.3} s"
                )?;
            }
            Err(error) => writeln!(out, "{name} {outputs:>3} {method:<10} seed {seed}: {error}")?,
        }
    }
    Ok(())
}
