"""A second opinion, vectorised and straight from the formulas: covariance, precision factor, plug-in and U-statistic Fisher matrices,
errors, delete-one jackknife by brute force, influence of each fiducial realisation. Reads a study folder, prints JSON."""

import json
import sys

import numpy as np

root = sys.argv[1]
plan = json.load(open(f"{root}/plan.json"))
fiducial = np.load(f"{root}/runs/run/fiducial.npy")
steps = plan["steps"]  # name -> [[at, weight, file], ...]
names = plan["parameters"]
prior = np.diag([0.0 if p is None else 1.0 / p**2 for p in plan["priors"]])
y = np.array(
    [sum(w * np.load(f"{root}/runs/run/{f}") for _, w, f in steps[name]) for name in names]
)  # [p, N, D]


def matrices(columns, rows):
    x, d = fiducial[:, columns], y[:, rows][:, :, columns]
    n_s, size = x.shape
    precision = (n_s - size - 2) / (n_s - 1) * np.linalg.inv(np.cov(x, rowvar=False))
    count = d.shape[1]
    mean = d.mean(axis=1)
    raw = mean @ precision @ mean.T
    total = count * mean
    same = np.einsum("anj,jk,bnk->ab", d, precision, d)
    corrected = (total @ precision @ total.T - same) / (count * (count - 1))
    return raw, corrected, precision, mean, x


def log_errors(fisher):
    total = fisher + prior
    return 0.5 * np.log(np.diag(np.linalg.inv(total))), -0.5 * np.log(np.diag(total))


def influences(columns):
    raw, corrected, precision, mean, x = matrices(columns, np.arange(y.shape[1]))
    n_s, size = x.shape
    factor = (n_s - size - 2) / (n_s - 1)
    u = (x - x.mean(axis=0)) @ (precision / factor) @ mean.T
    total = corrected + prior
    inverse = np.linalg.inv(total)
    marginalised, fixed = [], []
    for a in range(len(names)):
        v = u @ inverse[:, a]
        nu = n_s - 1 - size + len(names)
        g = factor * (v**2 - np.mean(v**2)) / (2 * inverse[a, a])
        marginalised.append(g * np.sqrt(n_s / nu) / n_s)
        g = factor * (u[:, a] ** 2 - np.mean(u[:, a] ** 2)) / (2 * total[a, a])
        fixed.append(g * np.sqrt(n_s / (n_s - size)) / n_s)
    return np.array(marginalised), np.array(fixed)


out = {}
everyone = np.arange(y.shape[1])
logs, leave_one_out, influence = {}, {}, {}
for name, columns in plan["combinations"].items():
    columns = np.array(columns)
    raw, corrected, *_ = matrices(columns, everyone)
    logs[name] = {"raw": log_errors(raw), "corrected": log_errors(corrected)}
    leave_one_out[name] = np.array(
        [log_errors(matrices(columns, np.delete(everyone, s))[1]) for s in everyone]
    )  # [N, 2, p]
    influence[name] = np.array(influences(columns))  # [2, p, N_s]
    out[name] = {
        "fisher": {"raw": raw.tolist(), "corrected": corrected.tolist()},
        "raw": np.exp(logs[name]["raw"]).tolist(),
        "corrected": np.exp(logs[name]["corrected"]).tolist(),
    }


def jackknife(values):
    n = len(values)
    return np.sqrt((n - 1) / n * ((values - values.mean(axis=0)) ** 2).sum(axis=0))


base = plan["baseline"]
for name in plan["combinations"]:
    out[name]["derivatives"] = jackknife(leave_one_out[name]).tolist()
    out[name]["covariance"] = np.sqrt((influence[name] ** 2).sum(axis=2)).tolist()
    out[name]["gainDerivatives"] = jackknife(leave_one_out[base] - leave_one_out[name]).tolist()
    out[name]["gainCovariance"] = np.sqrt(((influence[base] - influence[name]) ** 2).sum(axis=2)).tolist()
print(json.dumps(out))
