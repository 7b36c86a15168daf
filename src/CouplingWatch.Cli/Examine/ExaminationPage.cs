using System.Globalization;
using System.Text;
using CouplingWatch.Wire;

namespace CouplingWatch.Cli.Examine;

/// <summary>The examination as a page for a tired engineer: verdict, what happened when, what to change, what could not be judged.</summary>
internal static class ExaminationPage
{
    private const int Width = 100;

    public static string Write(Examination examination)
    {
        var page = new StringBuilder();
        page.Append(Path.GetFileName(examination.File)).Append('\n');
        Wrap(page, "", $"{examination.Verdict.Word}: {examination.Verdict.Text}");
        page.Append(CultureInfo.InvariantCulture, $"{examination.Steps:N0} steps, {examination.Iterations:N0} iterations.\n");
        Section(page, "What happened", examination.Alerts.Count == 0 ? ["Nothing that anybody needs to answer."] : [.. examination.Alerts.Select(Line)]);
        if (examination.Advice.Count > 0) Section(page, "What to change", [.. examination.Advice.Select(a => Line(a, examination.Alerts))]);
        if (examination.NotJudged.Count > 0) Section(page, "Not judged with what this recording holds", [.. examination.NotJudged.Select(n => $"{n.Check}: {n.Why}; send {n.Send}")]);
        if (examination.Notes.Count > 0) Section(page, "Passed over", examination.Notes);
        if (examination.Problem is { } problem) Section(page, "Not read any further", [problem.Sentence]);
        page.Append('\n');
        return page.ToString();
    }

    private static string Line(Alert alert)
    {
        var ended = alert.ClosedSeq is { } closed ? string.Create(CultureInfo.InvariantCulture, $", closed at seq {closed}") : "";
        var again = alert.LastStep > alert.Step ? string.Create(CultureInfo.InvariantCulture, $", last in step {alert.LastStep}") : "";
        var cause = alert.Cause is null ? "" : " (a consequence of another alert)";
        return string.Create(CultureInfo.InvariantCulture, $"step {alert.Step}, iteration {alert.Iteration} (seq {alert.Seq}{again}{ended})  {alert.Severity.ToString().ToLowerInvariant()}  {alert.Check}: {alert.Text}{cause}");
    }

    private static string Line(Advice advice, IReadOnlyList<Alert> alerts)
    {
        var because = string.Join(", ", advice.Because.Select(id => alerts.FirstOrDefault(a => a.Id == id)?.Check ?? id).Distinct());
        var text = advice.Text;
        if (because.Length > 0) text += $" — because of {because}";
        text += advice.Alters == "result" ? " — alters the result" : "";
        return advice.Caveat is { Length: > 0 } caveat ? $"{text} — {caveat}" : text;
    }

    private static void Section(StringBuilder page, string title, IEnumerable<string> lines)
    {
        page.Append('\n').Append(title).Append('\n');
        foreach (var line in lines) Wrap(page, "  - ", line);
    }

    private static void Wrap(StringBuilder page, string lead, string text)
    {
        var indent = new string(' ', lead.Length);
        var column = lead.Length;
        page.Append(lead);
        foreach (var word in text.Split(' '))
        {
            if (column > lead.Length && column + word.Length > Width)
            {
                page.Append('\n').Append(indent);
                column = lead.Length;
            }
            else if (column > lead.Length)
            {
                page.Append(' ');
                column++;
            }
            page.Append(word);
            column += word.Length;
        }
        page.Append('\n');
    }
}
