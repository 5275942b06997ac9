// The work of core/benches/line.rs in plain JavaScript, for comparison: the same points, the same figures.
//
//     node tests/bench_line.mjs

const [LENGTH, A, B, K, R] = [50e3, 140, 180, 0.13, 6371000];
const ROUNDS = 25;
// How far the parabola lies from this line at most, metres: twice what core/ computes for it.
const OFF = 1e-3;

function hill(n) {
    const at = new Float64Array(n);
    const top = new Float64Array(n);
    let state = 1;
    for (let i = 0; i < n; i += 1) {
        state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
        const share = (i + 0.5) / n;
        at[i] = LENGTH * share;
        top[i] = 100 - 240 * (share - 0.6) * (share - 0.6) + 3 * (state / 4294967296);
    }
    return [at, top];
}

function height(x) {
    const q = 1 - K;
    const [a, b] = [A, B].map((h) => Math.expm1(-q * Math.log1p(h / R)));
    const [turn, rest] = [(q / R) * x, (q / R) * (LENGTH - x)];
    const ends = (a * Math.sin(rest) + b * Math.sin(turn)) / Math.sin((q * LENGTH) / R);
    const bulge = (2 * Math.sin(turn / 2) * Math.sin(rest / 2)) / Math.cos((q * LENGTH) / R / 2);
    return R * Math.expm1(-Math.log1p(ends + bulge) / q);
}

const BEND = (2 * (A + B - 2 * height(LENGTH / 2))) / LENGTH ** 2;
const SLOPE = (B - A) / LENGTH - BEND * LENGTH;

function least(at, top) {
    let low = Infinity;
    for (let i = 0; i < at.length; i += 1) {
        const clearance = A + at[i] * (SLOPE + at[i] * BEND) - top[i];
        if (clearance < low) low = clearance;
    }
    const found = { clearance: Infinity, at: NaN };
    for (let i = 0; i < at.length; i += 1) {
        if (A + at[i] * (SLOPE + at[i] * BEND) - top[i] > low + 2 * OFF) continue;
        const clearance = height(at[i]) - top[i];
        if (clearance < found.clearance) Object.assign(found, { clearance, at: at[i] });
    }
    return found;
}

function sums(at, top) {
    let [x, height] = [0, 0];
    for (let i = 0; i < at.length; i += 1) {
        x += at[i];
        height += top[i];
    }
    return [x, height];
}

function microseconds(work) {
    let best = Infinity;
    for (let round = 0; round < ROUNDS; round += 1) {
        const start = performance.now();
        work();
        best = Math.min(best, performance.now() - start);
    }
    return best * 1e3;
}

console.log("   points     sums, µs    least, µs  ratio  ns/point  least");
for (const n of [1000, 10_000, 100_000, 1_000_000, 4_000_000]) {
    const [at, top] = hill(n);
    const plain = microseconds(() => sums(at, top));
    const took = microseconds(() => least(at, top));
    const found = least(at, top);
    const columns = [[n, 9, 0], [plain, 12, 1], [took, 12, 1], [took / plain, 6, 2], [(took * 1e3) / n, 9, 2]];
    const row = columns.map(([value, width, digits]) => value.toFixed(digits).padStart(width)).join(" ");
    console.log(`${row}  ${found.clearance.toFixed(9)} m at ${found.at.toFixed(3)} m`);
}
