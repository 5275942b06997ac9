//! `serve [PORT]` (what a bare `cargo run` does) builds the page and serves it; `build` only builds it; `budget` builds
//! it and says what it weighs.

use anyhow::{Context, Result, bail};
use farstaff_www::serve::Server;
use farstaff_www::{budget, build};

/// A port of our own: a page's offline copy stays with its address, and outlives the project that was served there.
const PORT: u16 = 8137;

fn main() -> Result<()> {
    let args: Vec<String> = std::env::args().skip(1).collect();
    let args: Vec<&str> = args.iter().map(String::as_str).collect();
    match args[..] {
        [] | ["serve"] => serve(PORT),
        ["serve", port] => serve(port.parse().with_context(|| format!("{port} is no port"))?),
        ["build"] => build().map(drop),
        ["budget"] => {
            let (report, over) = budget::report(&build()?);
            print!("{report}");
            if over {
                bail!("over budget");
            }
            Ok(())
        }
        _ => bail!("say serve, serve PORT, build or budget"),
    }
}

fn serve(port: u16) -> Result<()> {
    let site = build()?;
    let server = Server::start(site.clone(), port).or_else(|_| {
        println!("Port {port} is taken; a free one serves instead.");
        Server::start(site, 0)
    })?;
    println!("{}", server.url());
    server.wait();
    Ok(())
}
