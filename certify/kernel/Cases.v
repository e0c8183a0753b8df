(** * Kind [cases]: a tree of cases, every leaf of which is closed

    FORMAT.md, section 6, kind [cases]. At an edge a Hamiltonian cycle uses it or not, at
    a vertex it uses one pair of edges; every leaf is closed by forced moves, by another
    kind of evidence, or because a symmetry takes it to a node closed before. *)

From Coq Require Import Bool List PArith Arith FMapPositive.
From Certify Require Import Statement Question Sets Obstruction Counting Forced.
Import ListNotations.

Inductive node :=
  | Forced
  | ByObstruction (o : obstruction)
  | ByCounting (c : counting)
  | Edge (u v : vertex)
  | Vertex (v : vertex)
  | Like (j k : nat).

(** The nodes in preorder; a symmetry is the list of the images of 1, 2, ... *)
Record cases := {
  nodes : list node;
  symmetries : list (list vertex)
}.

(** A symmetry as two maps: a vertex to its image, and an image back to its vertex. *)
Record symmetry := {
  images : PositiveMap.t vertex;
  origins : PositiveMap.t vertex
}.

Definition at_vertex (m : PositiveMap.t vertex) (v : vertex) : vertex :=
  match PositiveMap.find v m with Some w => w | None => v end.

Definition symmetry_of (n : nat) (p : list vertex) : symmetry :=
  fold_right (fun e s => {|
      images := PositiveMap.add (fst e) (snd e) (images s);
      origins := PositiveMap.add (snd e) (fst e) (origins s)
    |})
    {| images := PositiveMap.empty _; origins := PositiveMap.empty _ |}
    (combine (count_up n 1%positive) p).

(** Whether [e] is the image of a pair that passes the test. *)
Definition image_of (s : symmetry) (test : vertex -> vertex -> bool) (e : vertex * vertex) : bool :=
  let x := at_vertex (origins s) (fst e) in
  let y := at_vertex (origins s) (snd e) in
  (at_vertex (images s) x =? fst e)%positive && (at_vertex (images s) y =? snd e)%positive
  && test x y.

Section Cases.

Variable Q : question.

(** The neighbours in [Q] (a variable, so that they are computed once). *)
Variable near : PositiveMap.t (list vertex).

Definition is_near (u v : vertex) : bool := among v (neighbours near u).

Definition is_needed (u v : vertex) : bool :=
  existsb (fun e => pair_eqb (u, v) e || pair_eqb (v, u) e) (needed Q).

(** An automorphism that maps the needed edges onto the needed edges: a permutation,
    because each vertex is found back from its image. *)
Definition is_symmetry (p : list vertex) : bool :=
  let s := symmetry_of (order Q) p in
  (length p =? order Q)
  && forallb (fun v =>
       let w := at_vertex (images s) v in
       (w <=? last_vertex Q)%positive && (at_vertex (origins s) w =? v)%positive)
       (count_up (order Q) 1%positive)
  && forallb (fun e => is_near (at_vertex (images s) (fst e)) (at_vertex (images s) (snd e)))
       (edges Q)
  && forallb (image_of s is_needed) (needed Q).

(** The question in which the used edges are needed and the removed ones are gone. *)
Definition rest_of (s : state) : question :=
  let kept := filter (fun e => is_left s (fst e) (snd e)) (edges Q) in
  {| order := order Q; edges := kept;
     needed := filter (fun e => is_chosen s (fst e) (snd e)) kept |}.

(** All pairs of a list, in the order of their places. *)
Fixpoint pairs (l : list vertex) : list (vertex * vertex) :=
  match l with
  | [] => []
  | a :: l' => map (pair a) l' ++ pairs l'
  end.

(** One child for each pair of edges that a cycle may use at [v]. The neighbours in
    [left] are in descending order. *)
Definition pairs_at (s : state) (v : vertex) : list assumptions :=
  let here := neighbours (chosen s) v in
  let allowed (ab : vertex * vertex) :=
    match here with [] => true | _ => among (fst ab) here || among (snd ab) here end in
  map (fun ab => ([(v, fst ab); (v, snd ab)], []))
    (filter allowed (pairs (rev (neighbours (left s) v)))).

(** A symmetry maps what is used and removed here onto all that a closed node assumes: an
    edge used here onto each edge that it assumes to be used, and an edge of [Q] removed here
    onto each edge that it assumes to be removed. *)
Definition is_like (s : state) (p : symmetry) (closed : assumptions) : bool :=
  forallb (image_of p (is_chosen s)) (fst closed)
  && forallb (image_of p (fun u v => is_near u v && negb (is_left s u v))) (snd closed).

(** The nodes not read yet, the number of the next one (counted from 1), and what is
    assumed at each node that is closed. *)
Record place := {
  ahead : list node;
  number : positive;
  closed : PositiveMap.t assumptions
}.

Variable known : list symmetry.

(** What the children of a node assume beside what the node assumes: nothing is left to
    assume at a closed leaf. [None]: the node is rejected. *)
Definition children (s : option state) (x : node) (done : PositiveMap.t assumptions) :
    option (list assumptions) :=
  let need (b : bool) (l : list assumptions) := if b then Some l else None in
  match s, x with
  | None, Forced => Some []
  | Some s, ByObstruction o => need (check_obstruction (rest_of s) o) []
  | Some s, ByCounting c => need (check_counting (rest_of s) c) []
  | Some s, Edge u v =>
      need ((u <? v)%positive && is_open s u v) [([(u, v)], []); ([], [(u, v)])]
  | Some s, Vertex v =>
      need ((v <=? last_vertex Q)%positive && negb (full (neighbours (chosen s) v)))
        (pairs_at s v)
  | Some s, Like j k =>
      match PositiveMap.find (Pos.of_succ_nat j) done, nth_error known k with
      | Some a, Some p => need (is_like s p a) []
      | _, _ => None
      end
  | _, _ => None
  end.

(** The state of a child. *)
Definition child_state (s : option state) (c : assumptions) : option state :=
  match s with
  | Some s => assume (last_vertex Q) (enough Q) c s
  | None => None
  end.

Definition both (a c : assumptions) : assumptions := (fst c ++ fst a, snd c ++ snd a).

(** Read one tree after another. *)
Fixpoint forest (read : assumptions -> place -> option place) (l : list assumptions) (p : place) :
    option place :=
  match l with
  | [] => Some p
  | c :: l' => match read c p with Some p' => forest read l' p' | None => None end
  end.

(** Read one tree, whose root has the state [s] and assumes [a]; where reading goes on.
    [fuel]: at least the number of nodes. *)
Fixpoint tree (fuel : nat) (s : option state) (a : assumptions) (p : place) : option place :=
  match fuel, ahead p with
  | S fuel', x :: later =>
      match children s x (closed p) with
      | Some l =>
          match forest (fun c => tree fuel' (child_state s c) (both a c)) l
            {| ahead := later; number := Pos.succ (number p); closed := closed p |} with
          | Some p' => Some {|
              ahead := ahead p';
              number := number p';
              closed := PositiveMap.add (number p) a (closed p')
            |}
          | None => None
          end
      | None => None
      end
  | _, _ => None
  end.

End Cases.

(** Exactly one tree, and every symmetry is one. *)
Definition check_cases (Q : question) (c : cases) : bool :=
  let near := adjacency Q in
  let known := map (symmetry_of (order Q)) (symmetries c) in
  let root := {| ahead := nodes c; number := 1; closed := PositiveMap.empty _ |} in
  (3 <=? order Q)
  && forallb (is_symmetry Q near) (symmetries c)
  && match tree Q near known (length (nodes c)) (start Q) ([], []) root with
     | Some p => match ahead p with [] => true | _ => false end
     | None => false
     end.
