namespace CouplingWatch.Architecture.Tests;

/// <summary>A project may reference only what stands after its arrow. DEVELOPERS.md shows the same table.</summary>
public class ArrowsBetweenProjects
{
    private static readonly Dictionary<string, string[]> Arrows = new()
    {
        ["CouplingWatch.Stream"] = [],
        ["CouplingWatch.Numerics"] = [],
        ["CouplingWatch.Coupling"] = ["CouplingWatch.Numerics"],
        ["CouplingWatch.Monitoring"] = ["CouplingWatch.Stream", "CouplingWatch.Numerics", "CouplingWatch.Coupling"],
        ["CouplingWatch.Storage"] = ["CouplingWatch.Monitoring"],
        ["CouplingWatch.Components"] = ["CouplingWatch.Stream"],
        ["CouplingWatch.Client"] = ["CouplingWatch.Stream"],
        ["CouplingWatch.Cli"] = ["CouplingWatch.Client", "CouplingWatch.Monitoring", "CouplingWatch.Storage"],
        ["CouplingWatch.Server"] = ["CouplingWatch.Monitoring", "CouplingWatch.Storage", "CouplingWatch.Components"],
        ["CoupledRuns"] = ["CouplingWatch.Client", "CouplingWatch.Coupling"],
        ["LockGate"] = ["CouplingWatch.Client", "CouplingWatch.Coupling", "CoupledRuns"],
        ["ColdPlate"] = ["CouplingWatch.Client", "CouplingWatch.Coupling", "CoupledRuns"],
        ["Demo"] = ["CouplingWatch.Server", "CoupledRuns", "LockGate", "ColdPlate"],
    };

    private static readonly Dictionary<string, string[]> Packages = new()
    {
        ["CouplingWatch.Stream"] = [],
        ["CouplingWatch.Numerics"] = ["MathNet.Numerics"],
        ["CouplingWatch.Coupling"] = [],
        ["CouplingWatch.Monitoring"] = [],
        ["CouplingWatch.Components"] = [],
        ["CouplingWatch.Client"] = [],
    };

    [Fact]
    public void Every_project_references_only_what_stands_after_its_arrow()
    {
        var wrong = from project in Repository.Projects
                    where !project.Folder.StartsWith("tests/", StringComparison.Ordinal)
                    from reference in project.References
                    where !Arrows.GetValueOrDefault(project.Name, []).Contains(reference)
                    select $"{project.Name} → {reference}";
        Assert.Empty(wrong);
    }

    [Fact]
    public void Every_project_outside_the_tests_has_its_place_in_the_table()
    {
        var names = Repository.Projects.Where(p => !p.Folder.StartsWith("tests/", StringComparison.Ordinal)).Select(p => p.Name);
        Assert.Equal(Arrows.Keys.Order(), names.Order());
    }

    [Fact]
    public void The_inner_projects_take_no_package_beyond_those_agreed()
    {
        var wrong = from project in Repository.Projects
                    where Packages.ContainsKey(project.Name)
                    from package in project.Packages
                    where !Packages[project.Name].Contains(package)
                    select $"{project.Name} takes {package}";
        Assert.Empty(wrong);
    }

    [Fact]
    public void A_test_project_references_what_it_tests_and_the_testing_library()
    {
        string[] joined = ["CouplingWatch.Browser.Tests", "CouplingWatch.Samples.Tests", "CouplingWatch.Benchmarks", "CouplingWatch.Sweeps", "CouplingWatch.Testing"];
        var wrong = from project in Repository.Projects
                    where project.Name.EndsWith(".Tests", StringComparison.Ordinal) && !joined.Contains(project.Name)
                    let tested = project.Name[..^".Tests".Length]
                    from reference in project.References
                    where reference != tested && reference != "CouplingWatch.Testing" && !Arrows.GetValueOrDefault(tested, []).Contains(reference)
                    select $"{project.Name} → {reference}";
        Assert.Empty(wrong);
    }

    [Fact]
    public void Every_project_is_part_of_the_solution()
    {
        var solution = File.ReadAllText(Repository.PathTo("CouplingWatch.sln")).Replace('\\', '/');
        Assert.Empty(Repository.Projects.Where(p => !solution.Contains($"{p.Folder}/{p.Name}.csproj", StringComparison.Ordinal)).Select(p => p.Name));
    }
}
