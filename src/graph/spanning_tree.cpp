#include "rillclock/graph/spanning_tree.hpp"

#include <algorithm>
#include <boost/graph/adjacency_list.hpp>
#include <boost/graph/breadth_first_search.hpp>
#include <boost/graph/compressed_sparse_row_graph.hpp>
#include <boost/graph/kruskal_min_spanning_tree.hpp>
#include <utility>

namespace rillclock {
namespace {

struct Position {
    std::size_t position;
};
using Tree = boost::compressed_sparse_row_graph<boost::directedS, boost::no_property, Position>;

/// Both ways along every edge, so that the tree can be walked from any root.
Tree two_way(std::size_t nodes, std::span<const Edge> edges) {
    std::vector<std::pair<Node, Node>> pairs;
    std::vector<Position> positions;
    for (std::size_t i = 0; i < edges.size(); ++i) {
        pairs.insert(pairs.end(), {{edges[i].a, edges[i].b}, {edges[i].b, edges[i].a}});
        positions.insert(positions.end(), {Position{i}, Position{i}});
    }
    return {boost::edges_are_unsorted_multi_pass, pairs.begin(), pairs.end(), positions.begin(), nodes};
}

class RecordEdge : public boost::default_bfs_visitor {
public:
    explicit RecordEdge(std::vector<std::size_t>& towards) : towards_(&towards) {}
    void tree_edge(Tree::edge_descriptor edge, const Tree& tree) const {
        (*towards_)[target(edge, tree)] = tree[edge].position;
    }

private:
    std::vector<std::size_t>* towards_;
};

}  // namespace

std::vector<std::size_t> minimum_spanning_forest(std::size_t nodes, std::span<const Edge> edges) {
    using Graph = boost::adjacency_list<boost::vecS, boost::vecS, boost::undirectedS, boost::no_property, Position>;
    Graph graph(nodes);
    for (std::size_t i = 0; i < edges.size(); ++i) boost::add_edge(edges[i].a, edges[i].b, Position{i}, graph);

    std::vector<Graph::edge_descriptor> chosen;
    boost::kruskal_minimum_spanning_tree(graph, std::back_inserter(chosen),
                                         boost::weight_map(boost::get(&Position::position, graph)));
    std::vector<std::size_t> positions;
    positions.reserve(chosen.size());
    for (const auto& edge : chosen) positions.push_back(graph[edge].position);
    return positions;
}

std::vector<std::size_t> edges_towards_root(std::size_t nodes, std::span<const Edge> tree, Node root) {
    std::vector<std::size_t> towards(nodes, no_edge);
    const Tree graph = two_way(nodes, tree);
    boost::breadth_first_search(graph, root, boost::visitor(RecordEdge(towards)));
    return towards;
}

}  // namespace rillclock
