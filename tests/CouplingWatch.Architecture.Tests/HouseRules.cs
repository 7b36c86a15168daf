using System.Text.RegularExpressions;

namespace CouplingWatch.Architecture.Tests;

public partial class HouseRules
{
    private static readonly string[] Code = ["src", "samples", "tests"];

    [Fact]
    public void The_top_level_holds_exactly_what_was_agreed()
    {
        string[] agreed = ["README.md", "DEVELOPERS.md", "LICENSE", "CouplingWatch.sln", "src", "tests", "wwwroot", "samples", ".ci", ".editorconfig", ".gitignore", ".gitattributes"];
        string[] local = [".git", ".vs", ".idea", "data", "TestResults"];
        var found = Directory.EnumerateFileSystemEntries(Repository.Root).Select(Path.GetFileName).Where(n => !local.Contains(n));
        Assert.Equal(agreed.Order(), found.Order());
    }

    [Fact]
    public void No_folder_or_type_is_named_for_a_kind_instead_of_a_concept()
    {
        string[] banned = ["Helpers", "Helper", "Utils", "Util", "Utilities", "Manager", "Managers", "Common", "Misc", "Interfaces"];
        var wrong = Repository.Files(Code, ".cs", ".razor")
            .Select(Repository.Relative)
            .Where(f => f.Split('/').Select(Path.GetFileNameWithoutExtension).Any(part => banned.Any(b => part == b || (part!.EndsWith(b, StringComparison.Ordinal) && b is not "Common"))));
        Assert.Empty(wrong);
    }

    [Fact]
    public void No_file_grows_beyond_one_idea()
    {
        var wrong = Repository.Files(["src", "samples"], ".cs", ".razor")
            .Select(f => (File: Repository.Relative(f), Lines: File.ReadLines(f).Count()))
            .Where(f => f.Lines > 320)
            .Select(f => $"{f.File}: {f.Lines} lines");
        Assert.Empty(wrong);
    }

    [Fact]
    public void The_numerics_and_the_judgement_know_no_clock_file_log_or_container()
    {
        string[] pure = ["src/CouplingWatch.Numerics", "src/CouplingWatch.Coupling", "src/CouplingWatch.Monitoring"];
        var wrong = from file in Repository.Files(pure, ".cs")
                    from line in File.ReadLines(file)
                    where Impure().IsMatch(line) && !line.TrimStart().StartsWith("//", StringComparison.Ordinal)
                    select $"{Repository.Relative(file)}: {line.Trim()}";
        Assert.Empty(wrong);
    }

    [Fact]
    public void No_test_waits_by_sleeping()
    {
        var wrong = from file in Repository.Files(["tests"], ".cs")
                    where !file.EndsWith("HouseRules.cs", StringComparison.Ordinal)
                    from line in File.ReadLines(file)
                    where line.Contains("Thread.Sleep", StringComparison.Ordinal)
                    select $"{Repository.Relative(file)}: {line.Trim()}";
        Assert.Empty(wrong);
    }

    [Fact]
    public void Every_path_named_in_the_guides_exists()
    {
        var wrong = from guide in new[] { "README.md", "DEVELOPERS.md" }
                    from Match match in PathInBackticks().Matches(File.ReadAllText(Repository.PathTo(guide)))
                    let path = match.Groups[1].Value.TrimEnd('/')
                    where !path.Contains('<') && !path.Contains('*') && !File.Exists(Repository.PathTo(path)) && !Directory.Exists(Repository.PathTo(path))
                    select $"{guide}: {path}";
        Assert.Empty(wrong);
    }

    [Fact]
    public void Every_folder_of_reference_data_says_where_it_comes_from()
    {
        var folder = Repository.PathTo("tests/reference");
        Assert.True(Directory.Exists(folder));
        Assert.Empty(Directory.EnumerateDirectories(folder).Where(d => !File.Exists(Path.Combine(d, "README.md"))).Select(Repository.Relative));
    }

    [GeneratedRegex(@"\b(DateTime(Offset)?\.(Utc)?Now|Stopwatch|Environment\.TickCount|File\.|Directory\.|Console\.|ILogger|IServiceCollection|new Random\(\)|Guid\.NewGuid|Random\.Shared)")]
    private static partial Regex Impure();

    [GeneratedRegex(@"`((?:src|tests|samples|wwwroot|\.ci)/[^\s`]*)`")]
    private static partial Regex PathInBackticks();
}
