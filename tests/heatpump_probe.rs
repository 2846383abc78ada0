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
#[test]
fn map_error() {
    for name in typical_names() {
        let sheet = Sheet::typical(name).unwrap();
        let fitted = fit(&sheet).unwrap();
        let hp = &fitted.heat_pump;
        let m = hp.machine();
        let map = hp.map();
        let lim = hp.limits();
        let t = Instant::now();
        let _ = Map::build(m, lim).unwrap();
        let tb = t.elapsed();
        let mut x: u64 = 12345;
        let mut rnd = || {
            x = x
                .wrapping_mul(6364136223846793005)
                .wrapping_add(1442695040888963407);
            (x >> 11) as f64 / (1u64 << 53) as f64
        };
        let (mut eq, mut ec, mut el, mut es, mut n) = (0f64, 0f64, 0f64, 0f64, 0);
        let mut worst = (0., 0., 0.);
        for _ in 0..20000 {
            let ts = lim.lowest_source_c + rnd() * (lim.highest_source_c - lim.lowest_source_c);
            let tf = 20.0 + rnd() * (lim.highest_flow_anywhere() - 20.0);
            if tf > lim.highest_flow_at(ts) || tf < ts + 10.0 {
                continue;
            }
            let f = rnd();
            let g = m.greatest_kw(ts, tf).unwrap();
            let l = m.least_kw(ts, tf).unwrap();
            let r = map.range(ts, tf);
            let q = r.least_kw + f * (r.greatest_kw - r.least_kw);
            let e = m.at_output(ts, tf, q).unwrap();
            let i = map.input(ts, tf, f);
            eq = eq.max((r.greatest_kw / g - 1.0).abs());
            el = el.max((r.least_kw / l - 1.0).abs());
            let c = (i.electric_per_heat * e.cop() - 1.0).abs();
            if c > ec {
                ec = c;
                worst = (ts, tf, f);
            }
            es = es.max((i.speed_share * m.machine.speeds.greatest(ts, tf) / e.speed - 1.0).abs());
            n += 1;
        }
        let t = Instant::now();
        let mut acc = 0.0;
        for k in 0..1000000 {
            let a = (k % 37) as f64 * 0.7 - 10.0;
            let b = 30.0 + (k % 23) as f64;
            let f = (k % 7) as f64 / 7.0;
            acc += map.range(a, b).greatest_kw + map.input(a, b, f).electric_per_heat;
        }
        let tl = t.elapsed();
        println!(
            "{name}: n {n} greatest {:.4}% least {:.4}% cop {:.4}% speed {:.3}% worst {worst:?} build {tb:?} lookup {:?} {acc}",
            eq * 100.,
            el * 100.,
            ec * 100.,
            es * 100.,
            tl / 1000000
        );
        let t = Instant::now();
        let mut acc = 0.0;
        let air = sheet.source == SourceKind::Air;
        for k in 0..1000000 {
            let a = if air {
                (k % 37) as f64 * 0.7 - 10.0
            } else {
                5.0
            };
            let d = hp.deliver(
                &ColdSide {
                    open_c: a,
                    k_per_kw: if air { 0.0 } else { 1.0 },
                    relative_humidity: Some(0.85),
                },
                &Duty {
                    heat_kw: (k % 29) as f64 * 0.4,
                    flow_c: 30.0 + (k % 23) as f64,
                    spread_k: 4.0,
                    hours: 1.0,
                    at_full_output: false,
                },
            );
            acc += d.electricity_kwh();
        }
        println!("   deliver {:?} {acc}", t.elapsed() / 1000000);
    }
}
