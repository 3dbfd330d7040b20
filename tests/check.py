"""Checks an array from its definition alone: python3 check.py plan.csv STRENGTH [CERTIFICATE]"""
import csv, hashlib, itertools, json, math, sys
from collections import Counter

path, strength = sys.argv[1], int(sys.argv[2])
with open(path, newline="") as file:
    header, *rows = list(csv.reader(file))
columns = list(zip(*rows))
levels = [len(set(column)) for column in columns]
print(f"{len(rows)} runs, {len(columns)} factors, levels {levels}")
for chosen in itertools.combinations(range(len(columns)), strength):
    product = math.prod(levels[j] for j in chosen)
    counts = Counter(zip(*(columns[j] for j in chosen)))
    if len(counts) != product or len(set(counts.values())) != 1:
        sys.exit(f"NOT orthogonal: columns {[header[j] for j in chosen]}: {dict(counts)}")
print(f"strength {strength} holds: every combination of every {strength} columns occurs equally often")
if len(sys.argv) > 3:
    with open(sys.argv[3]) as file:
        certificate = json.load(file)
    text = ",".join(map(str, levels)) + "\n" + "".join(",".join(row) + "\n" for row in rows)
    if hashlib.sha256(text.encode()).hexdigest() != certificate["sha256"]:
        sys.exit("the certificate is about another array (or the symbols do not count from 0)")
    if certificate["strength"] < strength or certificate["runs"] != len(rows):
        sys.exit("the certificate claims something else")
    print("the certificate is about this array")
