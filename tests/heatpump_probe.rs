use std::time::Instant;
use winterledger::heatpump::*;
#[test]
fn probe() {
    for name in typical_names() {
        let sheet = match Sheet::typical(name) {
            Ok(s) => s,
            Err(p) => {
                println!("{name}: {p}");
                continue;
            }
        };
        let t = Instant::now();
        let fitted = match fit(&sheet) {
            Ok(f) => f,
            Err(p) => {
                println!("{name}: {p}");
                continue;
            }
        };
        let t1 = t.elapsed();
        let t = Instant::now();
        let out = leave_one_out(&sheet).unwrap();
        let t2 = t.elapsed();
        let r = &fitted.report;
        println!(
            "== {name}: fit {t1:?} loo {t2:?} physics rms {:.2} loo rms {:.2} largest {:.2} strength {}",
            r.physics_rms_percent,
            rms(out.iter().copied()),
            r.largest_percent,
            r.strength
        );
        for (p, l) in r.points.iter().zip(&out) {
            println!(
                "  {:10} {:7} q {:5.2} cop {:4.2} | physics {:+5.1} heat {:+5.1} | model {:5.2} {:5.2} | left {:+5.1}",
                p.point.name(sheet.letter()),
                format!("{:?}", p.point.at),
                p.point.heat_kw,
                p.point.cop,
                p.physics_percent,
                p.physics_heat_percent,
                p.model_heat_kw,
                p.model_cop,
                l
            );
        }
        for (p, v) in &r.parameters {
            println!(
                "    {:40} {:8.4} {} (prior {:.4}, z {:+.1})",
                p.name,
                v,
                p.unit,
                p.centre,
                if p.width > 0.0 {
                    (p.inward(*v) - p.inward(p.centre)) / p.width
                } else {
                    0.0
                }
            );
        }
        for f in &r.findings {
            println!("    {f}");
        }
    }
}
