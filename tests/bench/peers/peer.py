"""Times what numpy and scikit-learn take for a workload, on one thread: reads requests, a line of JSON each, answers {"ms", ...}.

The data are float64 files, column after column; reading them is not timed.
"""
import json
import sys
import time

import numpy as np


def columns(request):
    return np.fromfile(request["file"], dtype=np.float64).reshape(request["columns"], -1)


def clr(data, _):
    logs = np.log(data)
    return logs - logs.mean(axis=0)


def components(data, request):
    coordinates = clr(data, request)
    coordinates -= coordinates.mean(axis=1, keepdims=True)
    covariance = coordinates @ coordinates.T / (data.shape[1] - 1)
    _, vectors = np.linalg.eigh(covariance)
    return vectors[:, ::-1][:, : request["scores"]].T @ coordinates


def sort(data, _):
    return np.sort(data, axis=1)


def kmeans(data, request):
    from sklearn.cluster import KMeans

    return KMeans(request["k"], n_init=10, random_state=1).fit(data).inertia_


def sweep(data, request):
    from sklearn.cluster import KMeans

    return sum(KMeans(k, n_init=10, random_state=1).fit(data).inertia_ for k in range(2, 13))


def mixture(data, request):
    from sklearn.mixture import GaussianMixture

    return GaussianMixture(request["k"], random_state=1).fit(data).score(data) * len(data)


def silhouette(data, request):
    from sklearn.metrics import silhouette_score

    return silhouette_score(data, np.asarray(request["labels"]))


BY_COLUMN = {"clr": clr, "components": components, "sort": sort}
BY_ROW = {"kmeans": kmeans, "sweep": sweep, "mixture": mixture, "silhouette": silhouette}

kept = {}
for line in sys.stdin:
    request = json.loads(line)
    work = request["work"]
    key = (request["file"], work in BY_ROW)
    if key not in kept:
        data = columns(request)
        kept = {key: np.ascontiguousarray(data.T) if work in BY_ROW else data}
    function = BY_ROW.get(work) or BY_COLUMN[work]
    started = time.perf_counter()
    result = function(kept[key], request)
    ms = 1000 * (time.perf_counter() - started)
    print(json.dumps({"ms": ms, "value": float(result) if np.isscalar(result) else None}), flush=True)
