/** What an example is about: the names that stand in its text. */
export interface ExampleNames {
  readonly study: string;
  readonly experiment: number;
  /** The data file that lies beside the script. */
  readonly file: string;
}

export const languages = ['curl', 'R', 'Python'] as const;
export type Language = (typeof languages)[number];

/** A whole script: where the server is and the key stand in HEADWATER_URL and HEADWATER_KEY. */
export type Script = Readonly<Record<Language, string>>;

/** The figures of a study as a table, and one mean by its name. */
export const readScript = ({ study }: ExampleNames): Script => ({
  curl: `curl --silent --show-error --fail-with-body \\
  -H "Authorization: Bearer $HEADWATER_KEY" \\
  "$HEADWATER_URL/api/v1/studies/${study}/results?format=csv"
`,
  R: `address <- paste0(Sys.getenv("HEADWATER_URL"), "/api/v1/studies/${study}/results?format=csv")
signed <- c(Authorization = paste("Bearer", Sys.getenv("HEADWATER_KEY")))
recoveries <- read.csv(url(address, headers = signed, encoding = "UTF-8"),
                       fileEncoding = "UTF-8-BOM", check.names = FALSE)
print(recoveries[, c("Analyte", "n", "Mean recovery (%)", "Verdict")], digits = 15)
`,
  Python: `import json, os, urllib.request

address = os.environ["HEADWATER_URL"] + "/api/v1/studies/${study}/results"
signed = {"Authorization": "Bearer " + os.environ["HEADWATER_KEY"]}
with urllib.request.urlopen(urllib.request.Request(address, headers=signed)) as answer:
    results = json.load(answer)["results"]
for row in results["rows"]:
    print(row["name"], row["n"], row["mean"], row["verdict"], sep="\\t")
`
});

/** The data template of an experiment, for the instrument's computer or a script to fill in. */
export const templateScript = ({ study, experiment }: ExampleNames): Script => ({
  curl: `curl --silent --show-error --fail --output template.xlsx \\
  -H "Authorization: Bearer $HEADWATER_KEY" \\
  "$HEADWATER_URL/api/v1/studies/${study}/experiments/${experiment}/template.xlsx"
`,
  R: `address <- paste0(Sys.getenv("HEADWATER_URL"),
                  "/api/v1/studies/${study}/experiments/${experiment}/template.xlsx")
signed <- c(Authorization = paste("Bearer", Sys.getenv("HEADWATER_KEY")))
download.file(address, "template.xlsx", mode = "wb", headers = signed, quiet = TRUE)
`,
  Python: `import os, urllib.request

address = (os.environ["HEADWATER_URL"]
           + "/api/v1/studies/${study}/experiments/${experiment}/template.xlsx")
signed = {"Authorization": "Bearer " + os.environ["HEADWATER_KEY"]}
with urllib.request.urlopen(urllib.request.Request(address, headers=signed)) as answer:
    with open("template.xlsx", "wb") as file:
        file.write(answer.read())
`
});

/** Brings a file in, and says what stands against it when something does. */
export const bringScript = ({ study, experiment, file }: ExampleNames): Script => ({
  curl: `curl --silent --show-error --fail-with-body \\
  -H "Authorization: Bearer $HEADWATER_KEY" \\
  -H "Content-Type: application/octet-stream" \\
  --data-binary @${file} \\
  "$HEADWATER_URL/api/v1/studies/${study}/imports?file=${file}&experiment=${experiment}"
`,
  R: `file <- "${file}"
address <- paste0(Sys.getenv("HEADWATER_URL"), "/api/v1/studies/${study}/imports?file=", file,
                  "&experiment=${experiment}")
answer <- system2("curl", stdout = TRUE, args = c(
  "--silent", "--show-error", "--fail-with-body",
  "-H", shQuote(paste("Authorization: Bearer", Sys.getenv("HEADWATER_KEY"))),
  "-H", shQuote("Content-Type: application/octet-stream"),
  "--data-binary", shQuote(paste0("@", file)), shQuote(address)))
cat(answer, sep = "\\n")
if (!is.null(attr(answer, "status"))) stop("the file was not stored")
`,
  Python: `import json, os, sys, urllib.error, urllib.request

name = "${file}"
address = (os.environ["HEADWATER_URL"] + "/api/v1/studies/${study}/imports"
           + "?experiment=${experiment}&file=" + name)
headers = {"Authorization": "Bearer " + os.environ["HEADWATER_KEY"],
           "Content-Type": "application/octet-stream"}
with open(name, "rb") as file:
    request = urllib.request.Request(address, data=file.read(), headers=headers, method="POST")
try:
    with urllib.request.urlopen(request) as answer:
        brought = json.load(answer)
except urllib.error.HTTPError as refusal:
    problem = json.load(refusal)
    print(problem["detail"])
    for place in problem.get("problems", []):
        print(place["message"], place.get("fix", ""))
    sys.exit(1)
print(brought["outcome"], brought["import"]["valueCount"], "values")
for question in brought["questions"]:
    print(question["answer"], question["code"], question["message"])
`
});
